/* A calculation note, before anybody writes it: what was given, what came of it, and how.

   Made by the language in the arena of the line; the shell, which alone knows the day and the
   files, has it written.                                                                        */
#ifndef RESULT_NOTE_H
#define RESULT_NOTE_H

#include <stddef.h>

struct answer; struct chart; struct remark; struct workings_record;

/* A row: a name and what stands behind it.  */
struct note_row { const char *name, *text, *source; struct note_row *next; };

/* A composition, drawn as a bar.  */
struct note_gas { const char *name; size_t count; const char *const *parts;
                  const double *fractions; struct note_gas *next; };

/* A question, its figures (COUNT answers) and what stood under them.  */
struct note_result {
  const char *statement;
  const struct answer *answers;
  size_t count;
  const struct remark *taken, *notes, *cautions;
  const struct workings_record *workings;        /* steps no result before it has shown */
  struct note_result *next;
};

struct note_picture { const struct chart *chart; struct note_picture *next; };

struct note {
  const char *file, *title;
  const struct note_row *given;                  /* definitions: name, statement */
  const struct note_row *conditions;             /* reference states and settings: source behind */
  const struct note_result *results;
  const struct note_gas *gases;
  const struct note_picture *pictures;
  const struct note_row *statements;             /* as typed, in order; only `text` */
  const struct note_row *inputs;                 /* files that were read; only `text` */
  size_t results_left_out, statements_left_out;
  int digits;
  struct note *next;                             /* of the same statement: open */
};

#endif
