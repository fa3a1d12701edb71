/* What stands before the cursor: the words of the statement being typed and what may follow.  */
#ifndef SHELL_PHRASE_H
#define SHELL_PHRASE_H

#include <stdbool.h>
#include <stddef.h>

/* What may stand at a place.  */
enum phrase_place {
  PLACE_NOTHING,                  /* a comment, a number, a label: nothing to offer */
  PLACE_OPENING,                  /* statement words; a question's first word */
  PLACE_UNIT,                     /* behind a number */
  PLACE_TARGET,                   /* a unit asked for */
  PLACE_STATE,                    /* an item of a state */
  PLACE_OPERAND,                  /* a name, a component, a property */
  PLACE_OWN_NAME,                 /* a name the user gave */
  PLACE_SHOWN,                    /* anything that has a card */
  PLACE_SETTING, PLACE_VALUE,     /* a setting; what it can be set to */
  PLACE_TOPIC, PLACE_LIST,
  PLACE_PICTURE,                  /* the word itself: show NAME as ... */
  PLACE_FILE,
  PLACE_WORD                      /* a word that goes on behind an operand */
};

enum { PHRASE_WORDS = 64 };

/* A word, a text in quotes or a sign that parts words; borrowed from the line.  */
struct phrase_word { const char *text; size_t n; };

/* The statement up to the word that is being typed.  Of a very long one the last words.  */
struct phrase {
  enum phrase_place place;
  bool in_text;                   /* the cursor is inside quotes */
  size_t count;
  struct phrase_word words[PHRASE_WORDS];
  struct phrase_word opening;     /* the first of all */
};

/* Reads the first N bytes of LINE, which end where the word being typed begins.  LINE may hold
   several physical lines.                                                                       */
void phrase_read (struct phrase *, const char *line, size_t n);

bool phrase_word_is (const struct phrase_word *, const char *text);

/* The last of the words that opens a part of a statement ("in", "at", "="); null: none does.  */
const struct phrase_word *phrase_clause (const struct phrase *);

#endif
