/* What is pasted at the prompt from a screen of ours.

   Typed lines carry a rail in the margin, printed lines never do: so a piece of a session can be
   pasted as it stands.  The rails are taken off and printed lines among them left out.          */
#ifndef SHELL_PASTE_H
#define SHELL_PASTE_H

#include <stdbool.h>
#include <stddef.h>

struct text;

/* Bytes of the rail LINE begins with ("gas | ", "gas*| ", "    | ", "   || "); 0: none.  */
size_t paste_rail (const char *line);

/* Takes rails off the lines of TYPED, which are parted by '\n'.  If any line behind the first
   carries one, those without are printed ones: they are left out, and *LEFT_OUT is their number
   (blank ones uncounted).  Returns whether anything changed.                                    */
bool paste_clean (struct text *typed, size_t *left_out);

#endif
