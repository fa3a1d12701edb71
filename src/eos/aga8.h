/* AGA8 DETAIL inside: what its own files share.  */
#ifndef EOS_AGA8_H
#define EOS_AGA8_H

#include "eos/aga8_table.h"

struct aga8_mixture {
  double x[AGA8_COUNT];                    /* mol/mol, by the order of the table */
  double molar_mass;                       /* kg/mol */
  struct helmholtz_mixture residual;
};

/* For struct equation.  */
enum eos_range aga8_range (const void *mixture, double T, double p);
double aga8_uncertainty (const void *mixture, double T, double p);

#endif
