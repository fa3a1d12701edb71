/* A calculation note as a document that can be filed.  */
#ifndef REPORT_NOTE_H
#define REPORT_NOTE_H

struct note; struct text;

enum note_form { NOTE_MARKDOWN, NOTE_HTML };

/* What the note cannot know: the day ("2026-12-01") and the program ("gaswright 0.1").  */
struct note_about { const char *date, *program; };

/* The form that the name of a file asks for by its ending.  */
enum note_form note_form_of (const char *file);
void note_write (struct text *, enum note_form, const struct note *, const struct note_about *);

#endif
