/* Random figures have the moments of their distributions, and come again with their seed.  */
#include "config.h"
#include <math.h>
#include "libtest.h"
#include "support/draw.h"

enum { DRAWS = 1000000 };

/* Mean, variance, third and fourth moment of DRAWS figures.  */
static void
moments (double (*draw) (struct draw *), double moment[4], double *largest)
{
  struct draw d;
  draw_start (&d, 42);
  *largest = 0;
  for (int k = 0; k < 4; k++)
    moment[k] = 0;
  for (int i = 0; i < DRAWS; i++) {
    double x = draw (&d), power = 1;
    *largest = fmax (*largest, fabs (x));
    for (int k = 0; k < 4; k++)
      moment[k] += (power *= x) / DRAWS;
  }
}

/* 0, 1, 0, 3 (normal distribution); each within five standard deviations of its estimate.  */
static void
normal (void)
{
  double m[4], largest;
  moments (draw_normal, m, &largest);
  CHECK (fabs (m[0]) < 5 * sqrt (1.0 / DRAWS));
  CHECK (fabs (m[1] - 1) < 5 * sqrt (2.0 / DRAWS));
  CHECK (fabs (m[2]) < 5 * sqrt (15.0 / DRAWS));
  CHECK (fabs (m[3] - 3) < 5 * sqrt (96.0 / DRAWS));
  CHECK (largest > 4 && largest < 7);      /* P(|x| > 7) = 2.6e-12 */
}

/* 0, 1, 0, 9/5 between -sqrt(3) and sqrt(3) (uniform distribution).  */
static void
rectangular (void)
{
  double m[4], largest;
  moments (draw_rectangular, m, &largest);
  CHECK (fabs (m[0]) < 5 * sqrt (1.0 / DRAWS));
  CHECK (fabs (m[1] - 1) < 5 * sqrt (0.8 / DRAWS));
  CHECK (fabs (m[2]) < 5 * sqrt (27.0 / 7 / DRAWS));
  CHECK (fabs (m[3] - 1.8) < 5 * sqrt ((9 - 3.24) / DRAWS));
  CHECK (largest < sqrt (3.0) && largest > 0.9999 * sqrt (3.0));
}

static void
seeds (void)
{
  struct draw a, b, c;
  draw_start (&a, 7);
  draw_start (&b, 7);
  draw_start (&c, 8);
  int same = 0, other = 0;
  for (int i = 0; i < 100; i++) {
    double x = draw_rectangular (&a);
    CHECK (fabs (x) < sqrt (3.0));
    same += fabs (x - draw_rectangular (&b)) <= 0;
    other += fabs (x - draw_rectangular (&c)) > 0;
  }
  SAME_INT (same, 100);
  SAME_INT (other, 100);
}

static const struct test_case cases[] = {
  { "normal figures", normal },
  { "rectangular figures", rectangular },
  { "seeds", seeds },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
