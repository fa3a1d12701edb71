/* Caloric properties of a gas at a temperature and a density, from the Helmholtz energy with its
   ideal-gas part.  SI units, molar.  Enthalpy and entropy of every pure component are 0 as an
   ideal gas at 298.15 K and 101325 Pa.                                                          */
#ifndef EOS_CALORIC_H
#define EOS_CALORIC_H

struct caloric {
  double Z, pressure;                      /* Pa */
  double molar_mass;                       /* kg/mol, the one of the equation */
  double cv, cp;                           /* J/(mol K) */
  double energy, enthalpy, gibbs;          /* J/mol */
  double entropy;                          /* J/(mol K) */
  double speed_of_sound;                   /* m/s */
  double isentropic_exponent;              /* -(v/p)(dp/dv)_s */
  double joule_thomson;                    /* (dT/dp)_h, K/Pa */
};

/* A mixture as the equations of reference have it: X by the order of gerg_table.h, kg/mol.  */
struct helmholtz_mixture;
struct caloric_gas {
  const struct helmholtz_mixture *residual;
  const double *x;
  double molar_mass;
};
void caloric_at (const struct caloric_gas *, double T, double rho, struct caloric *);

#endif
