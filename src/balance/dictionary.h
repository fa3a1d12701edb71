/* The solutions without negative flows within one block of what may still move; see program.h.  */
#ifndef BALANCE_DICTIONARY_H
#define BALANCE_DICTIONARY_H

#include <stdbool.h>
#include <stddef.h>
#include "balance/network.h"
#include "balance/system.h"

struct arena; struct dictionary; struct null_block; struct null_space;

/* All as of program_make; UNIT: the largest flow.  */
struct dictionary_of {
  const struct system *system;
  const double *v;
  double unit;
  const struct null_space *space;
  const struct null_block *block;
  bool (*interrupted) (void);
};

struct dictionary *dictionary_make (struct arena *, const struct dictionary_of *);
bool dictionary_feasible (const struct dictionary *);
/* The least (SIGN -1) or the greatest value (1) of a form whose columns all lie in the block.  */
double dictionary_end (struct dictionary *, const struct form *, double sign);
/* These set the block's columns of V.  SEED is below DICTIONARY_SEEDS.  */
enum { DICTIONARY_SEEDS = 8 };
void dictionary_point (const struct dictionary *, double v[]);
void dictionary_inside (const struct dictionary *, size_t seed, double v[]);

#endif
