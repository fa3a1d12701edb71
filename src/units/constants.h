/* Physical constants.  */
#ifndef UNITS_CONSTANTS_H
#define UNITS_CONSTANTS_H

/* Molar gas constant, J/(mol K), exact: k = 1.380649e-23 J/K times N_A = 6.02214076e23 1/mol
   (SI Brochure, 9th ed. (2019), section 2.2; CODATA 2018).                                    */
#define GAS_CONSTANT 8.31446261815324

/* Standard atmosphere, Pa, exact (10th CGPM (1954), Resolution 4).  */
#define STANDARD_ATMOSPHERE 101325.0

/* 0 degC in K, exact (SI Brochure, 9th ed. (2019), section 2.3.1).  */
#define ICE_POINT 273.15

#endif
