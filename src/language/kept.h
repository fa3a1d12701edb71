/* Answers that are kept, so that `workings` and `note` can tell of them later.

   What a question came to stays in the arena of the line it was asked in; the session holds that
   arena back.  The last answer is kept always, the first KEPT_MOST for a note.  Beside its own
   steps an answer leans on those of the names it used, which are kept with their definitions:
   before anything changes that, an answer is settled, which copies all it leans on.             */
#ifndef LANGUAGE_KEPT_H
#define LANGUAGE_KEPT_H

#include <stdbool.h>
#include <stddef.h>
#include "language/evaluate/value.h"

struct answer; struct arena; struct definition; struct evaluation; struct remark; struct result;
struct session; struct statement; struct step;

/* More answers than anybody files.  */
enum { KEPT_MOST = 500, KEPT_LINES_MOST = 2000 };

/* A statement that ran, as typed; a file that was opened.  */
struct kept_line { const char *text; struct kept_line *next; };

struct kept_answer {
  struct arena *arena;
  const char *statement;
  const struct answer *answers;            /* COUNT of them; more may follow that are not its own */
  size_t count;
  const struct remark *taken, *notes, *cautions;
  struct value value;
  struct step *steps;                      /* its own; once settled, all in order of dependence */
  struct step **end;                       /* some way along them towards their end; or null */
  struct definition *const *used;          /* before it is settled */
  size_t used_count;
  unsigned touched;                        /* what it leaned on */
  bool settled;
};

struct kept {
  struct arena *line, *spare;              /* of the line that runs; of the one after; or null */
  bool answered;                           /* LINE holds an answer */
  struct arena *filed[KEPT_MOST];          /* arenas held back for a note */
  size_t filed_count;
  struct kept_answer *answers[KEPT_MOST];
  size_t count, settled;
  size_t beyond;                           /* answers that no note will have */
  struct kept_answer *last;                /* or null */
  struct arena *log;                       /* of the lines; or null: none yet */
  struct kept_line *lines, **last_line, *opened;
  size_t line_count, lines_beyond;
};

/* Keeps what a question came to.  EV evaluated it; ANSWERS are its rows in RESULT.  */
struct asked { const struct evaluation *ev; const struct statement *statement;
               const struct value *value; const struct answer *answers; size_t count; };
void kept_add (struct session *, const struct asked *, const struct result *);
/* One more step of the answer in RESULT, which was just kept: it is the last one.  */
void kept_extend (struct session *, const struct result *, const struct step *);
/* Rows behind those of the answer in RESULT, which was just kept; in its arena.  */
void kept_add_row (struct session *, const struct result *, const struct answer *);
/* Keeps a statement that ran, or the name of the file it opened, for a note.  */
void kept_log (struct session *, const char *text, bool opens);
/* Takes back what was kept behind the first COUNT lines: the file that held them failed.  */
void kept_unlog (struct session *, size_t count);
/* Makes kept answers independent of definitions, which are about to change.  */
void kept_settle (struct session *);
/* The same of one, for looking at it.  */
void kept_settle_one (struct session *, struct kept_answer *);
/* The same figure of the same thing by the same formula; never of what was asked.  */
bool kept_same_step (const struct step *, const struct step *);
void kept_destroy (struct session *);

#endif
