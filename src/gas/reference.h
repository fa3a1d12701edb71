/* Reference conditions by name: what `normal`, `iso2533`, ... stand for.

   T and p are recorded once, as the definition writes them ("60 degF", "14.73 psia"), and turned
   into SI by the table of units.                                                                */
#ifndef GAS_REFERENCE_H
#define GAS_REFERENCE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct fault; struct reference_table; struct unit_table;

/* T in K, p in Pa; relative humidity 0 to 1, NAN where the definition has none.  */
struct conditions { double T, p, humidity; };

struct reference {
  const char *name;              /* the word of the language: "normal", "iso13443" */
  const char *synonyms;          /* other names, parted by '|'; "" if none */
  const char *title;             /* "Normzustand, the normal cubic metre" */
  struct conditions at;
  const char *temperature, *pressure, *moisture;       /* as the defining text writes them */
  const char *used_by, *source, *note;
  bool users;
};

/* Reads tables/references.tsv (names of one meaning) and reference_names.tsv (words that stand for
   several: `standard`, `ntp`, `stp`), with DIRECTORY's rows on top.  The unit table is needed
   while reading only.  Owned.                                                                   */
struct reference_table *reference_table_create (struct unit_table *, const char *directory,
                                                struct fault *) MUST_CHECK;
void reference_table_destroy (struct reference_table *);
size_t reference_table_size (const struct reference_table *);
const struct reference *reference_table_at (const struct reference_table *, size_t i);

enum reference_match { REFERENCE_NONE, REFERENCE_ONE, REFERENCE_AMBIGUOUS };
/* Capitals, blanks, hyphens and underscores do not count.  *CANDIDATES, for AMBIGUOUS: names parted
   by commas, borrowed.                                                                          */
enum reference_match reference_find (const struct reference_table *, const char *name, size_t n,
                                     const struct reference **found, const char **candidates);

#endif
