/* Compositions side by side, a bar each, with what they are made of.  */
#ifndef REPORT_NOTE_BARS_H
#define REPORT_NOTE_BARS_H

struct note_gas; struct text;

/* As SVG, behind OUT: every gas of the list.  */
void note_bars_write (struct text *out, const struct note_gas *);

#endif
