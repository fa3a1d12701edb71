/* GERG-2008 as the paper prints it, term by term, to measure against.  */
#ifndef PLAIN_GERG_H
#define PLAIN_GERG_H

/* Density (mol/m3) at T and p of the mole fractions X, by the order of gerg_table.h: Newton's steps
   from the ideal gas.  NAN if they do not end.                                                  */
double plain_gerg_density (const double x[], double T, double p);

#endif
