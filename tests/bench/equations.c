/* Speed of the equations of reference, in one run with a plain evaluation of the same equation.
   Figures of a machine, not a test: the aims are printed beside them.                            */
#include "config.h"

#include <math.h>
#include <stdio.h>
#include <string.h>
#include <time.h>

#include "eos/gerg.h"
#include "plain_gerg.h"
#include "support/fault.h"

enum { STATES = 2048, ROUNDS = 15 };

static double
now_us (void)
{
  struct timespec t;

  clock_gettime (CLOCK_MONOTONIC, &t);
  return (double) t.tv_sec * 1e6 + (double) t.tv_nsec * 1e-3;
}

struct gas { const char *keys[GERG_COUNT]; double x[GERG_COUNT]; };

/* A natural gas of ten components (the Gulf Coast gas of AGA Report No. 8).  */
static const struct gas gulf_coast = {
  { "CH4", "N2", "CO2", "C2H6", "C3H8", "iC4H10", "nC4H10", "iC5H12", "nC5H12", "nC6H14" },
  { 0.965222, 0.002595, 0.005956, 0.018186, 0.004596, 0.000977, 0.001007, 0.000473, 0.000324,
    0.000664 },
};

static double x_ten[GERG_COUNT], x_all[GERG_COUNT];
static double T[STATES], p[STATES], rho[STATES], plain[STATES];

static void
set_up (void)
{
  unsigned long seed = 8;

  for (int i = 0; i < 10; i++) {
    x_ten[cover_find (&gerg_table.cover, gulf_coast.keys[i])] = gulf_coast.x[i];
  }
  for (int i = 0; i < GERG_COUNT; i++) {
    x_all[i] = 0.95 * x_ten[i] + 0.05 / GERG_COUNT;
  }
  for (int i = 0; i < STATES; i++) {
    seed = (seed * 1103515245 + 12345) & 0x7fffffff;
    T[i] = 260 + 120 * (double) seed / 0x7fffffff;
    seed = (seed * 1103515245 + 12345) & 0x7fffffff;
    p[i] = 1e5 + 149e5 * (double) seed / 0x7fffffff;
  }
}

static void
run_plain (const double x[])
{
  for (int i = 0; i < STATES; i++) {
    plain[i] = plain_gerg_density (x, T[i], p[i]);
  }
}

static void
solve_one (const struct gerg_mixture *mixture, int i)
{
  struct helmholtz_isotherm line;

  equation_gerg_2008.set_isotherm (mixture, T[i], &line);
  rho[i] = equation_gerg_2008.roots (&line, p[i]).gas;
}

/* Composition fixed.  */
static void
run_states (const double x[])
{
  struct gerg_mixture mixture;

  gerg_mix (x, &mixture);
  for (int i = 0; i < STATES; i++) {
    solve_one (&mixture, i);
  }
}

/* Several states at once.  */
static void
run_batch (const double x[])
{
  struct gerg_mixture mixture;

  gerg_mix (x, &mixture);
  equation_gerg_2008.densities (&mixture, &(struct state_list) { STATES, T, p }, rho);
}

/* A new composition at every call.  */
static void
run_compositions (const double x[])
{
  struct gerg_mixture mixture;

  for (int i = 0; i < STATES; i++) {
    gerg_mix (x, &mixture);
    solve_one (&mixture, i);
  }
}

/* Least time of a state, in microseconds, and the largest difference from the plain densities.  */
static double
measured (void (*run) (const double x[]), const double x[], double *off)
{
  double least = HUGE_VAL;

  for (int k = 0; k < ROUNDS; k++) {
    const double begin = now_us ();
    run (x);
    least = fmin (least, (now_us () - begin) / STATES);
  }
  *off = 0;
  for (int i = 0; i < STATES && run != run_plain; i++) {
    *off = fmax (*off, fabs (rho[i] / plain[i] - 1));
  }
  return least;
}

static void
row (const char *what, double us, double ratio, double off, const char *aim)
{
  printf ("%-34s %10.3f us   %6.1fx the plain one (%s), differs by %.0e\n", what, us, ratio, aim,
          off);
}

int
main (void)
{
  double off, base, one, batch, changing, base_all, all;

  set_up ();
  base = measured (run_plain, x_ten, &off);
  printf ("%-34s %10.3f us\n", "GERG-2008 term by term, 10", base);
  one = measured (run_states, x_ten, &off);
  row ("a state, 10 components", one, base / one, off, "8x or more");
  batch = measured (run_batch, x_ten, &off);
  row ("a state, several at once", batch, base / batch, off, "25x or more");
  changing = measured (run_compositions, x_ten, &off);
  row ("a state, composition changing", changing, base / changing, off, "4x or more");
  base_all = measured (run_plain, x_all, &off);
  printf ("%-34s %10.3f us\n", "GERG-2008 term by term, 21", base_all);
  all = measured (run_states, x_all, &off);
  row ("a state, 21 components", all, base_all / all, off, "");
  printf ("%-34s %10.2f      1.3 or less\n", "21 components over 10", all / one);
  return 0;
}
