/* Random figures for trials: the same seed gives the same figures, on any machine.  */
#ifndef SUPPORT_DRAW_H
#define SUPPORT_DRAW_H

#include <stdbool.h>
#include <stdint.h>

struct draw { uint64_t state[4]; double second; bool has_second; };

void draw_start (struct draw *, uint64_t seed);
double draw_normal (struct draw *);           /* mean 0, standard deviation 1 */
double draw_rectangular (struct draw *);      /* the same; between -sqrt(3) and sqrt(3) */

#endif
