/* The components an equation of reference is made for, and a composition seen through them.  */
#ifndef EOS_COVER_H
#define EOS_COVER_H

#include <stdbool.h>
#include <stddef.h>

struct composition; struct species;

/* Rows of STRIDE bytes that begin with a key of up to seven letters, padded with null bytes.  */
enum { COVER_KEY = 8 };
struct cover { const char *keys; size_t stride, count; };

/* The row of a key, or -1.  */
int cover_find (const struct cover *, const char *key);
/* As in struct equation.  */
double cover_lumped (const struct cover *, const struct composition *);
bool cover_all (const struct cover *, const struct composition *, const char **lacking);
/* Mole fractions by row, what is lumped with its nearest.  A trace of which too little is known for
   that is taken away from the whole.                                                            */
void cover_fractions (const struct cover *, const struct composition *, double x[]);

#endif
