/* Statements that are no questions: one handler each, one file each.

   A handler reads its statement, calls what does the work and fills the result; it changes the
   session only when it succeeds.                                                                */
#ifndef LANGUAGE_COMMANDS_COMMANDS_H
#define LANGUAGE_COMMANDS_COMMANDS_H

#include <stdbool.h>
#include "language/session_private.h"
#include "support/check.h"

struct card; struct composition; struct gas_value; struct reference; struct species;
struct stream; struct unit;

typedef bool command (struct session *, const struct statement *, struct result *,
                      struct fault *);

/* Runs any statement but a question.  */
bool command_run (struct session *, const struct statement *, struct result *, struct fault *)
  MUST_CHECK;

command command_check, command_define, command_normalise, command_set, command_show, command_list,
  command_forget, command_trim, command_trend, command_samples, command_save,
  command_open, command_help, command_undo, command_solve, command_workings, command_note;

/* show NAME as picture (picture.c).  */
bool picture_of (struct session *, const struct statement *, struct definition *, struct result *,
                 struct fault *) MUST_CHECK;
/* The files a session read, as rows (note.c); does a file's name end so?  */
struct note_row;
const struct note_row *note_inputs (const struct session *, struct arena *);
bool note_ends_in (const char *file, const char *end);

/* The cards of `show` (card_*.c).  What was typed, or read, for a part of a list: "58.2 ± 0.3",
   "850 ppm", "rest", "<5 ppm".                                                                 */
const char *typed_amount (struct arena *, const struct node *part);
bool card_of_gas (struct session *, const struct gas_value *, const char *name,
                  struct result *, struct fault *) MUST_CHECK;
bool card_of_stream (struct session *, const struct stream *, const char *name,
                     struct result *, struct fault *) MUST_CHECK;
bool card_of_quantity (struct session *, const struct statement *, struct definition *,
                       struct result *, struct fault *) MUST_CHECK;
void card_of_species (struct session *, const struct species *, struct result *);
bool card_of_unit (struct session *, const struct unit *, struct result *, struct fault *)
  MUST_CHECK;
void card_of_reference (struct session *, const struct reference *, struct result *);
void card_of_state (struct session *, const struct definition *, struct result *);
void card_of_sheet (const struct definition *, struct result *);
/* Its equations, matrix or detectability; false for another PART.  */
bool card_of_balance_part (const struct definition *, const char *part, struct result *);
void card_of_balance (struct session *, const struct definition *, struct result *);
void card_of_property (struct session *, enum property, struct result *);
/* All settings, or only ONE.  */
void card_of_settings (struct session *, const enum setting *one, struct result *);
void card_add_figure (struct result *, struct card *, const char *name, double value,
                      const char *unit, const char *basis);
/* A line that says where it burns in air; none for a gas that does not.  */
void card_add_limits (struct session *, struct result *, struct card *,
                      const struct composition *);

/* "gas model".  */
const char *setting_name (enum setting);

/* How a kept answer came about (workings.c), in the arena.  */
struct kept_answer; struct workings_record;
const struct workings_record *workings_of (struct session *, struct arena *, struct kept_answer *);

#endif
