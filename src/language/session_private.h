/* The inside of a session, for the language layer alone.  */
#ifndef LANGUAGE_SESSION_PRIVATE_H
#define LANGUAGE_SESSION_PRIVATE_H

#include <stdbool.h>
#include <stddef.h>
#include "language/evaluate/evaluation.h"
#include "language/mentions.h"
#include "language/session.h"
#include "support/check.h"

struct calorific_tables; struct composition; struct kept; struct map; struct property_tables;
struct readings; struct reference_table; struct remark; struct result; struct species; struct step;

enum name_kind { NAME_GAS, NAME_STREAM, NAME_QUANTITY, NAME_REFERENCE, NAME_SHEET,
                 NAME_BALANCE };

/* A name and its formula.  The tree was parsed from `source` into the definition's own arena and
   is never changed; a redefinition makes another definition.  What it came to is kept until a
   setting changes or a name it leans on.                                                        */
struct definition {
  struct arena *arena, *cache;             /* owned */
  const char *name, *source;
  enum name_kind kind;
  const struct statement *statement;
  const char *const *needs;                /* the user's names it mentions */
  size_t need_count;
  unsigned holders;                        /* session and undo log */
  const char *maker;                       /* the balance that made the stream; null: typed */

  bool fresh;                              /* the cache holds */
  unsigned long looked;                    /* the last search that came by, and what it found */
  bool leans;
  struct value value;
  struct state state;                      /* of a reference */
  unsigned touched;
  struct assumption *assumptions;
  struct source *sources;
  size_t assumption_count, source_count;
  struct remark *notes, *cautions;         /* from the cache */
  const struct step *steps;                /* how it came about, but for the names it used: */
  struct definition **used;
  size_t used_count;
  bool told;                               /* its notes have stood under an answer */
  struct file_read *file;                  /* of a gas from a file: what was read; or null */
  bool asked_over;                         /* a trend over its file has said what that holds */
};

/* One change that undo can take back; the changes of a group are taken back together.  */
struct change {
  unsigned group;
  const char *name;                        /* null: settings */
  struct definition *before, *after;       /* null: there was none, there is none */
  size_t place;                            /* where `before` stood */
  struct settings settings;                /* before */
};

enum { UNDO_MOST = 200 };

/* A block whose `end` has not come yet.  */
struct open_block {
  struct arena *arena;                     /* null: no block is open */
  enum block kind;
  const char *name;
  struct place name_at;
  const char **line;                       /* the statements so far, the first one included */
  struct place *at;                        /* where each was typed */
  size_t count, room;
  size_t at_fault;                         /* the line the last fault was in; 0: none of its own */
  bool spoilt;                             /* a line of it failed where nobody can type it anew */
};

struct session {
  struct session_options options;
  struct open_block block;
  char *last_balance;                      /* what a bare `solve` solves; or null */
  struct vocabulary vocabulary;
  struct reference_table *references;
  const struct species *water, *oxygen;
  const struct composition *air;           /* as predefined */
  struct calorific_tables *calorific;      /* read when first asked for; or null */
  struct readings *readings;               /* of a check; read when first asked for, or null */
  struct property_tables *properties;      /* each read when first asked for */
  struct arena *arena;                     /* what lasts: tables' extras, texts of settings */
  struct settings settings;
  struct map *names;                       /* of struct definition */
  struct map *mentioned;                   /* every name a definition ever mentioned, and by
                                              which (mentions.c) */
  unsigned long look;                      /* counts searches through the definitions */
  struct definition **order;               /* as first defined */
  size_t count, room;
  struct change *changes;
  size_t change_count, change_room;
  unsigned group, groups_open;             /* of the next change; how deep in `open` */
  char *last_subject;                      /* source of the last question's expression; or null */
  size_t last_length, last_room;
  struct kept *kept;                       /* owned */
};

const struct settings *session_settings (const struct session *);
/* What a check tries.  Null with FAULT if a user's table of readings cannot be read.  */
const struct readings *session_readings (struct session *, struct fault *) MUST_CHECK;

/* ---- Definitions (definition.c) ---- */

/* A definition of NAME by SOURCE, a whole statement: parsed, not yet worked out.  Null with
   FAULT, places counted in SOURCE.                                                              */
struct definition *definition_make (struct session *, const char *source, enum name_kind,
                                    struct fault *) MUST_CHECK;
void definition_hold (struct definition *);
void definition_release (struct definition *);       /* null is allowed */
/* Works a definition out afresh, into its cache; places of faults are counted in its source.    */
bool definition_refresh (struct session *, struct definition *, struct fault *) MUST_CHECK;
/* What a definition comes to, from its cache where that still holds.  What it touched, assumed
   and drew on goes into EV; a fault inside it is placed at AT, where its name stands.           */
const struct value *definition_value (struct evaluation *, struct definition *,
                                      struct place at) MUST_CHECK;
const struct state *definition_state (struct evaluation *, struct definition *,
                                      struct place at) MUST_CHECK;
/* A stream (or, of a balance of whole flows, a quantity) made by BALANCE, and what it comes to
   (balance/made.c).                                                                             */
struct definition *definition_made (const char *name, const char *balance,
                                    enum name_kind) MUST_CHECK;
bool made_body (struct evaluation *, const struct definition *, struct value *) MUST_CHECK;
/* Adds the notes and cautions of a definition, and of those it needs, that have not stood under
   an answer yet (ALL: even those that have).                                                    */
void definition_tell (struct session *, struct definition *, bool all, struct result *);
/* Its own cautions alone.  */
void definition_warn (const struct definition *, struct result *);
/* Cautions that follow from what is in a gas.  NAME: what it is called.  */
void caution_gas (const struct session *, struct result *, const struct composition *,
                  const char *name);

/* ---- Files (from_file.c) ---- */

struct laboratory; struct text;

/* Appends what a file holds; false with errno.  */
bool file_bytes (const char *path, struct text *) MUST_CHECK;
/* Why it did not, from errno.  */
const char *file_reason (int error);
/* Reads the file of a gas that is being defined: its statement gets its parts, and the definition
   what is to be said.                                                                           */
bool file_bind (struct session *, struct definition *, struct statement *, struct fault *)
  MUST_CHECK;
/* Notes what became of the files of gases that D leans on since they were read.  */
void file_tell_changes (struct session *, struct definition *, struct result *);
/* What a statement's file came to, under an answer.  */
void file_tell (const struct definition *, struct result *);
/* All samples of a file, each of which takes the place of the list in a statement's tree.  */
struct file_samples {
  const struct laboratory *laboratory;
  struct statement *statement;             /* not bound to any sample */
  struct node typed;                       /* its list, without items */
  struct result *told;                     /* takes what single samples have to say; or null */
  size_t told_count;
};
/* Of a definition that is from a file, or (SOURCE) of the words of such a statement.  In ARENA.  */
bool file_samples (struct session *, struct arena *, const char *source, struct file_samples *,
                   struct fault *) MUST_CHECK;
/* The gas of a sample, with the treatments of the statement; good until the next one.  */
const struct node *file_sample (struct session *, struct arena *, struct file_samples *, size_t i,
                                struct fault *) MUST_CHECK;
/* What an evaluation assumed of a sample's own figures (below detection, peaks), each once.  */
void file_tell_assumed (const struct evaluation *, struct result *);
/* What was understood of a file, as remarks in ARENA.  */
struct remark *file_remarks (struct arena *, const char *path, const struct laboratory *);

/* ---- Names (names.c) ---- */

struct definition *name_find (const struct session *, const char *name, size_t length);
/* Notes that NAME, which was just defined, hides air or a component.  */
void name_note_hidden (struct session *, const char *name, struct result *);
/* Defines a name by SOURCE (a whole statement): refuses what depends on itself or leaves another
   without sense, keeps it and makes it undoable.  FROM is the statement as typed, for places.   */
bool name_define (struct session *, const struct statement *from, const char *source,
                  enum name_kind, struct result *, struct fault *) MUST_CHECK;
bool name_forget (struct session *, const struct node *names, struct fault *) MUST_CHECK;
/* "there is no ..." with the nearest name offered.  */
bool name_unknown (struct evaluation *, const struct node *name);
/* Puts a definition where it belongs, or (null) takes the name away; returns where it stood.    */
size_t name_place (struct session *, const char *name, struct definition *, size_t place);
void names_clear (struct session *);
/* The names of definitions whose figures lean on what BITS stand for: "raw, feed"; null: none.  */
const char *names_touching (const struct session *, struct arena *, unsigned bits);

/* ---- Blocks (block.c) ---- */

bool block_open (struct session *, const struct statement *, struct fault *) MUST_CHECK;
bool block_add (struct session *, const struct statement *, struct fault *) MUST_CHECK;
bool block_close (struct session *, const struct statement *end, struct result *,
                  struct fault *) MUST_CHECK;
void block_drop (struct session *);
/* Takes back the last line of the block that is open, which is said.  */
void block_undo (struct session *, struct result *);
/* The streams a balance made go, but for those that others lean on.  */
void balance_drop_made (struct session *, const char *balance);
/* The balance that a bare `solve` means from now on.  */
void balance_remember (struct session *, const char *name);
/* A place counted in the source of the open block, counted where the line was typed.  */
void block_place (struct session *, struct fault *);

/* ---- Undo (undo.c) ---- */

/* Notes a change: of NAME from BEFORE (which stood at PLACE) to AFTER, or (null) of settings.   */
void undo_note (struct session *, const char *name, struct definition *before,
                struct definition *after, size_t place, const struct settings *settings_before);
/* Takes the last change back and says in RESULT what it was.  Kind undo-empty.  */
bool undo_last (struct session *, struct result *, struct fault *) MUST_CHECK;
/* Changes from `open` to `close` are one.  undo_group_drop takes them back.  */
void undo_group_open (struct session *);
void undo_group_close (struct session *);
void undo_group_drop (struct session *);
void undo_clear (struct session *);

/* ---- Questions (ask.c, question.c, convert.c) ---- */

/* One figure of an answer.  */
struct figure {
  const char *what;
  double value;
  const struct unit *unit;                  /* null: a plain number */
  const char *unit_text;
  const char *moisture, *basis, *label;
  bool named;                               /* its row needs `what` to be understood */
};
struct figures { struct figure *at; size_t count, room; };

/* What an answer is about: what it is called, and where that stands.  */
struct subject { const char *what; struct place at; };
/* VALUE in TARGET (null: in the units it was typed in).  */
bool convert_value (struct evaluation *, const struct value *, const struct target *,
                    const struct subject *, struct figures *) MUST_CHECK;
/* What the question S asks for, and its figures in every target, in that order.  */
bool question_figures (struct evaluation *, const struct statement *, struct value *,
                       struct figures *) MUST_CHECK;
/* The same question once more, under an evaluation the caller prepared.  */
bool question_again (struct evaluation *, const struct statement *, struct figures *) MUST_CHECK;
/* Puts what was taken into the evaluation's result, with what the usual alternatives would do.  */
void question_tell_taken (struct evaluation *, const struct statement *, const struct figures *);
/* The same of anything that can be worked out again, by AGAIN, under an evaluation prepared.  */
struct retold { bool (*again) (struct evaluation *, const void *with, struct figures *);
              const void *with; };
void retold_taken (struct evaluation *, const struct retold *, const struct figures *);
/* Puts all there is to say of a question into the evaluation's result.  */
bool question_answer (struct evaluation *, const struct statement *) MUST_CHECK;
/* Runs a question: figures, uncertainties, assumptions with their effects, notes.  */
bool ask (struct session *, const struct statement *, struct result *, struct fault *) MUST_CHECK;
#endif
