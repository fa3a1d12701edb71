/* From text to trees.

   Scanning and parsing know the fixed tables (units, components, reserved words, properties,
   settings) and nothing of a session: what parses, parses in every session.  Every fault points
   at the first word that cannot stand there; something missing points behind the last word.     */
#ifndef LANGUAGE_PARSE_H
#define LANGUAGE_PARSE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct arena; struct fault; struct species_table; struct statement; struct unit_table;

/* The fixed tables, borrowed.  */
struct vocabulary { struct unit_table *units; struct species_table *species; };

/* Where a line stands: outside blocks, in a balance, in a sheet.  */
enum block { BLOCK_NONE, BLOCK_BALANCE, BLOCK_SHEET };

struct parser;

/* Parses the N bytes at TEXT, a logical line that began as line FIRST of its source; it may hold
   several statements parted by ';'.  Trees, statements and the parser itself live in ARENA.     */
struct parser *parser_create (struct arena *, const struct vocabulary *, const char *text,
                              size_t n, int first, enum block) MUST_CHECK;

/* The next statement.  True with *STATEMENT null at the end; false with FAULT (which was
   initialised).  After a fault the next call goes on behind the statement that failed.  The
   parser follows blocks that open and close in its own text.                                    */
bool parser_next (struct parser *, struct statement **, struct fault *) MUST_CHECK;
enum block parser_block (const struct parser *);
/* The word that opens a statement and is one slip away from WORD; null: none.  */
const char *statement_like (const char *word);
/* Source text of the statement that failed, as typed, for messages (valid after a fault).       */
const char *parser_source (const struct parser *);

#endif
