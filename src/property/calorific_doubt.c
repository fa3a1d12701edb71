/* The figures of the tables that are uncertain themselves, and their being moved.  */
#include "config.h"
#include "property/calorific_private.h"

#include "gas/composition.h"
#include "gas/species.h"

double
calorific_move (const struct calorific_moves *moves, const struct calorific_doubt *doubt)
{
  bool uncertain = moves != NULL && moves->by != NULL && doubt->u > 0;     /* NAN: not stated */
  return uncertain ? doubt->u * moves->by (moves->with, doubt) : 0;
}

double
calorific_air_molar_mass (const struct calorific_tables *tables, enum calorific_edition edition,
                          const struct calorific_moves *moves)
{
  const struct calorific_constants *c = &tables->edition[edition];
  return c->air_molar_mass + calorific_move (moves, &(struct calorific_doubt) {
      CALORIFIC_DOUBT_AIR, NULL, c->u_air_molar_mass, &c->u_air_molar_mass });
}

double
calorific_weights_move (const struct calorific_tables *tables, enum calorific_edition edition,
                        const struct composition *gas, const struct calorific_moves *moves)
{
  const double *u = tables->edition[edition].u_atom;
  double moved = 0;
  if (moves == NULL || moves->by == NULL)
    return 0;
  for (size_t k = 0; k < ATOMS; k++) {
    double atoms = 0;
    for (size_t i = 0; i < gas->count; i++) {
      const struct calorific_component *component = calorific_find (tables, gas->species[i]);
      bool counted = component != NULL && component->known[CALORIFIC_2016];
      double n = counted ? component->atoms[k]
                         : species_atoms (gas->species[i], calorific_atom[k]);
      atoms += gas->fraction[i] * n;
    }
    if (atoms > 0)
      moved += atoms * calorific_move (moves, &(struct calorific_doubt) {
          CALORIFIC_DOUBT_ATOM, calorific_atom[k], u[k], &u[k] });
  }
  return moved;
}
