/* GERG-2008 inside: what its own files and the tests share.  */
#ifndef EOS_GERG_H
#define EOS_GERG_H

#include "eos/gerg_table.h"

struct gerg_mixture {
  double x[GERG_COUNT];                    /* mol/mol, by the order of the table */
  double molar_mass;                       /* kg/mol */
  struct helmholtz_mixture residual;
};

/* Reducing functions and merged terms for the fractions X, which add up to 1.  */
void gerg_mix (const double x[GERG_COUNT], struct gerg_mixture *);

#endif
