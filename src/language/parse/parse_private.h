/* What the files of the parser share.

   Every parse function takes the parser, leaves it behind what it read, and returns null or
   false once a fault is recorded.  Grammar rules stand in the first line of each.               */
#ifndef LANGUAGE_PARSE_PARSE_PRIVATE_H
#define LANGUAGE_PARSE_PARSE_PRIVATE_H

#include <stdbool.h>
#include <stddef.h>
#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "units/unit.h"
#include "language/parse.h"
#include "language/parse/scan.h"
#include "language/tree.h"

/* Brackets and `of` nest no deeper; a statement has no more operators and treatments.  Whoever
   walks a tree by recursion is safe within these.                                               */
enum { DEPTH_LIMIT = 200, LINKS_LIMIT = 1000 };

/* A unit as read.  */
struct unit_read { const struct unit *unit; const char *text; struct place at; };

struct parser {
  struct arena *arena;
  const struct vocabulary *words;
  struct scanner scan;            /* behind `token` */
  struct token token;             /* the next one, not yet taken */
  struct place last;              /* of the last one taken */
  size_t end;                     /* its end in the text */
  size_t begin;                   /* start of the statement in the text */
  struct token first;             /* of the statement */
  struct place second;            /* place of its second token; line 0: not reached */
  struct fault *fault;
  enum block block;
  int depth, links;
  int brackets;                   /* open ones */
  bool aim_left, aim_right;       /* inside a side of an aim, outside brackets */
  struct unit_read unit;          /* the last unit read */
  bool in_target;                 /* ... was a target */
  const char *source;             /* of the statement that failed */
};

/* A way to look at further tokens without taking any.  */
struct look { struct scanner scan; struct token token; };

/* -- Tokens (parse_token.c).  */

/* Takes the token at hand.  */
void token_take (struct parser *);
/* A look that begins at the token at hand; look_next goes to the one behind.  */
struct look look_here (const struct parser *);
void look_next (struct look *);
/* The token behind the one at hand.  */
struct token token_behind (const struct parser *);

/* Is T the word WORD, letter by letter?  */
static inline bool
token_is (const struct parser *p, const struct token *t, const char *word)
{
  size_t n = strlen (word);
  return t->kind == TOKEN_WORD && t->end - t->start == n
         && memcmp (p->scan.text + t->start, word, n) == 0;
}

/* Is the token at hand the word WORD?  */
static inline bool
at_word (const struct parser *p, const char *word)
{
  return token_is (p, &p->token, word);
}

/* Takes the token at hand if it is the word WORD.  */
bool accept_word (struct parser *, const char *word);
bool accept (struct parser *, enum token_kind);
/* Takes a comma, or `and` in its place, or both.  */
bool accept_comma (struct parser *);
/* Is the statement at its end?  */
bool at_end (const struct parser *);
bool token_is_end (const struct token *);
/* May T open a unit: a word that is not reserved, or a sign?  */
bool opens_unit (const struct parser *, const struct token *);
/* May T open the amount of a part?  */
bool opens_amount (const struct parser *, const struct token *);
/* Has the token a byte right behind it that ties it to the next word: feed/recycle?  */
bool joined_to_name (const struct parser *, const struct token *);

/* Is it one of the words of the language that are not free?  */
bool word_is_reserved (const char *text, size_t n);
/* The statement word that the word is one slip away from; null: none.  */
const char *statement_near (struct parser *, const struct token *);
/* The word in small letters if that makes it a reserved word; null otherwise.  */
const char *word_in_capitals (struct parser *, const struct token *);
/* The kind of statement the token opens, or STATEMENT_EMPTY.  */
enum statement_kind statement_opened (const struct parser *, const struct token *);
/* One of dry, wet, real, ideal, gross, net as its bit, or 0.  */
unsigned word_bit (const struct parser *, const struct token *);
/* The longest property whose text begins at the token at hand; its words, 0 if there is none.  */
size_t property_here (const struct parser *, enum property *);
/* Likewise for settings.  */
size_t setting_here (const struct parser *, enum setting *);
/* Are the words behind one another, parted by blanks, those of TEXT?  Their number or 0.  */
size_t words_here (const struct parser *, const char *text);
void take_words (struct parser *, size_t count);

/* A copy of the token's text, cut short if it is very long, for messages.  */
const char *token_text (const struct parser *, const struct token *);
const char *bytes_text (const struct parser *, size_t start, size_t end);

/* -- Faults (parse_fault.c).  All return false.  */

bool fail (struct parser *, enum message, struct place, const char *fact1, const char *fact2);
/* Something is missing behind the last word.  */
bool fail_unfinished (struct parser *, const char *way_on);
/* The token at hand, which may not stand here, as KIND, unless it is a fault by itself or the
   end.  */
bool fail_here (struct parser *, enum message kind, const char *fact1, const char *fact2);
/* The token at hand cannot stand here; what follows a figure's unit is explained.  */
bool fail_unexpected (struct parser *, const char *way_on);
/* The same behind a sum, where a number and `dry` have kinds of their own.  */
bool fail_behind_sum (struct parser *, const char *way_on);
/* Succeeds at the end of the statement.  */
bool expect_end (struct parser *, const char *way_on);
bool expect_word (struct parser *, const char *word, const char *way_on);
/* '=', in a statement of the form WAY_ON.  */
bool expect_equals (struct parser *, const char *way_on);
/* A text in quotes.  */
bool expect_text (struct parser *, const char **text, const char *way_on);
/* Replaces what was recorded so far.  */
bool fail_instead (struct parser *, enum message, struct place, const char *fact1,
                   const char *fact2);
/* Goes one level deeper (the caller takes it back from p->depth), or counts one operator; false
   with too-deep when there are too many.                                                        */
bool enter (struct parser *);
bool add_link (struct parser *);

/* -- Nodes and names (parse_name.c).  */

struct node *node_new (struct parser *, enum node_kind, struct place from);
/* Ends the node's place behind what was taken last.  */
void node_close (const struct parser *, struct node *);
struct node *node_link (struct parser *, enum node_kind, struct node *a, struct node *b);
/* Is the token at hand the start of a name?  */
bool at_name (const struct parser *);
/* NAME, where one is referred to.  */
struct node *parse_name (struct parser *, const char *way_on);
/* The same, and neither a word of the language nor the key of a component.  */
struct node *parse_free_name (struct parser *, const char *way_on);
/* The name of a fuel, of several words too: natural gas is natural-gas.  */
struct node *parse_fuel (struct parser *, const char *way_on);
/* How many words of it stand here; 0 or 1: no name of several.  */
size_t fuel_words (const struct parser *);
/* NAME { "," NAME }  */
struct node *parse_names (struct parser *, const char *way_on);
/* NAME, where one is made.  FORM: what the whole looks like.  */
bool parse_new_name (struct parser *, const char *form, const char **name, struct place *at);
/* Bytes of the name that begins at the token: one word, or a component's of several.  */
size_t name_length (const struct parser *, const struct token *);

/* -- Quantities (parse_unit.c, parse_quantity.c).  */

/* A unit begins at the token at hand.  */
bool parse_unit (struct parser *, struct unit_read *);
/* Is there a unit at T?  No fault, nothing taken.  */
bool unit_at (struct parser *, const struct token *t, struct unit_read *, struct scanner *behind);
/* Is TEXT a unit?  */
bool text_is_unit (struct parser *, const char *text);
bool unit_is_pressure (const struct unit *);
bool unit_is_temperature (const struct unit *);

enum where { IN_SUM, IN_LIST, IN_STATE };
/* NUMBER, its value and as typed; what stands behind is not looked at.  */
bool parse_bare_number (struct parser *, double *number, const char **figure);
/* [ "-" ] NUMBER [ UNIT ] [ spread ], with words behind in a sum.  */
struct node *parse_quantity (struct parser *, enum where);
/* { "dry" | "wet" | "real" | "ideal" | "gross" | "net" }  */
bool parse_unit_words (struct parser *, unsigned *words);
/* Does a number, or '-' and a number, stand here?  */
bool at_number (const struct parser *);

/* -- Sums (parse_sum.c).  */

struct node *parse_sum (struct parser *);
struct node *parse_chain (struct parser *);
/* "(" sum ")", without a list; in a state it holds one figure.  */
struct node *parse_bracket (struct parser *, enum where);
/* head { change }: the changes behind a head, parse_change.c.  */
struct node *parse_changes (struct parser *, struct node *of);
/* value = [ "-" ] quantity | NAME [ UNIT ] | "(" sum ")"  */
struct node *parse_value (struct parser *, const char *way_on);

/* -- Gases (parse_list.c).  */

/* Does a list of parts begin with the token at hand?  */
bool at_list (const struct parser *);
struct node *parse_list (struct parser *);
/* What is expected where a part is to begin.  */
const char *part_expected (struct parser *);

/* -- States and targets (parse_state.c, parse_target.c).  */

/* item { "," item }; with TARGET, of a target: what a unit opens is not taken.  */
struct node *parse_state (struct parser *, const struct unit_read *target, struct place at);
/* One item; what it may be twice is told by *GROUP, a bit.  */
struct node *parse_item (struct parser *, unsigned *group);
/* target { "," target }, behind `in`; ONE: no more than one.  */
struct target *parse_targets (struct parser *, bool one);

/* -- Statements.  */

bool parse_statement (struct parser *, struct statement *);             /* parse_statement.c */
bool parse_gas (struct parser *, struct statement *);                   /* parse_gas.c */
/* What follows `from`; ONE: a sample may be named.  */
bool parse_from_file (struct parser *, struct statement *, bool one);
bool parse_set (struct parser *, struct statement *);                   /* parse_set.c */
bool parse_trim (struct parser *, struct statement *);                  /* parse_trim.c */
bool parse_check (struct parser *, struct statement *);
bool parse_balance_line (struct parser *, struct statement *);          /* parse_block.c */
bool parse_sheet_line (struct parser *, struct statement *);
/* claim = [ "-" ] quantity { word } [ "at" state ]; a bare number only with UNITLESS.  */
struct node *parse_claim (struct parser *, bool unitless);

#endif
