/* Networks for tests, with streams of one letter.

       struct plant *plant = plant_make ("FPW", 2);
       plant_boundary (plant, BOUNDARY_SEPARATE, "F", "PW");
       plant_total (plant, 'F', 100);

   Every fact is exact (rounding 0) until the test changes plant->fact[i]; each function that adds
   one gives back its number.  Components have the number ALL where a total is meant.            */
#ifndef PLANT_H
#define PLANT_H

#include <stddef.h>
#include "balance/network.h"

struct arena;

#define ALL ((size_t) -1)

struct plant {
  struct arena *arena;
  const char *names;
  struct network network;
  struct boundary *boundary;
  struct fact *fact;
  bool *possible;
  double *molar_mass;
};

struct plant *plant_make (const char *names, size_t components);
void plant_free (struct plant *);

void plant_boundary (struct plant *, enum boundary_kind, const char *inlets, const char *outlets);
/* To the boundary added last.  NU by component.  */
void plant_reaction (struct plant *, const double nu[]);
void plant_never (struct plant *, char stream, size_t component);

size_t plant_stream (const struct plant *, char stream);
size_t plant_column (const struct plant *, char stream, size_t component);

size_t plant_total (struct plant *, char stream, double);
size_t plant_flow (struct plant *, char stream, size_t component, double);
size_t plant_fraction (struct plant *, char stream, size_t component, double);
/* Dry: component WATER is left out of the whole.  */
size_t plant_dry_fraction (struct plant *, char stream, size_t component, size_t water, double);
size_t plant_composition (struct plant *, char stream, const double x[]);
/* LEFT = value * RIGHT, of a component or of ALL.  */
size_t plant_ratio (struct plant *, char left, size_t of_left, char right, size_t of_right,
                    double);
size_t plant_share (struct plant *, char outlet, char inlet, double);

struct solution;
/* The network solved as usual; a fault fails the case.  */
const struct solution *plant_solved (struct plant *);

#endif
