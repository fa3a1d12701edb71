/* Reference conditions by name: what `normal`, `ISO 2533`, ... stand for.  */
#ifndef GAS_REFERENCE_H
#define GAS_REFERENCE_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

struct fault; struct reference_table;

/* T in K, p in Pa; relative humidity 0 to 1, NAN where the definition has none.  */
struct conditions { double T, p, humidity; };

struct reference {
  const char *name;              /* the word of the language: "normal", "iso13443" */
  const char *title;             /* "Normzustand (DIN 1343)" */
  struct conditions at;
  const char *temperature, *pressure, *moisture;       /* as the defining text writes them */
  const char *used_by, *source, *note;
  bool users;
};

/* Names of one meaning; names that stand for several (`standard`, `ntp`, `satp`, `stp`).  Owned. */
struct reference_table *reference_table_create (const char *directory, struct fault *) MUST_CHECK;
void reference_table_destroy (struct reference_table *);
size_t reference_table_size (const struct reference_table *);
const struct reference *reference_table_at (const struct reference_table *, size_t i);

enum reference_match { REFERENCE_NONE, REFERENCE_ONE, REFERENCE_AMBIGUOUS };
/* *CANDIDATES, for AMBIGUOUS: names parted by commas, borrowed.  */
enum reference_match reference_find (const struct reference_table *, const char *name, size_t n,
                                     const struct reference **found, const char **candidates);

#endif
