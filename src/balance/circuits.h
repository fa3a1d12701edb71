/* The elementary vectors of a left null space.  */
#ifndef BALANCE_CIRCUITS_H
#define BALANCE_CIRCUITS_H

#include <stdbool.h>
#include <stddef.h>

struct arena;

/* Rows of Z (ROWS x K) that lie along each other count once here.  Each elementary vector is Z y
   with y orthogonal to K - 1 independent ones: TAKE gets every such y, some of them more than once.
   False, without a call: there are too many to look at all.                                     */
typedef void circuit_taker (void *data, const double y[]);
bool circuits_all (struct arena *, size_t rows, size_t k, const double z[], circuit_taker *take,
                   void *data);

#endif
