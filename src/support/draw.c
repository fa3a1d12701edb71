#include "config.h"
#include "support/draw.h"

#include <math.h>

/* SplitMix64 (Steele, Lea and Flood, OOPSLA 2014), to fill the state from any seed.  */
static uint64_t
split_mix (uint64_t *seed)
{
  uint64_t z = *seed += UINT64_C (0x9e3779b97f4a7c15);
  z = (z ^ (z >> 30)) * UINT64_C (0xbf58476d1ce4e5b9);
  z = (z ^ (z >> 27)) * UINT64_C (0x94d049bb133111eb);
  return z ^ (z >> 31);
}

void
draw_start (struct draw *d, uint64_t seed)
{
  for (int i = 0; i < 4; i++)
    d->state[i] = split_mix (&seed);
  d->has_second = false;
}

static uint64_t
rotate (uint64_t x, int by)
{
  return (x << by) | (x >> (64 - by));
}

/* xoshiro256++ (Blackman and Vigna, ACM Trans. Math. Softw. 47 (2021) 36): period 2^256 - 1.  */
static uint64_t
next (struct draw *d)
{
  uint64_t *s = d->state;
  uint64_t result = rotate (s[0] + s[3], 23) + s[0], t = s[1] << 17;
  s[2] ^= s[0];
  s[3] ^= s[1];
  s[1] ^= s[2];
  s[0] ^= s[3];
  s[2] ^= t;
  s[3] = rotate (s[3], 45);
  return result;
}

/* Above 0, below 1.  */
static double
draw_uniform (struct draw *d)
{
  /* The middle of one of 2^52 steps: neither 0 nor 1.  */
  return ((double) (next (d) >> 12) + 0.5) * 0x1p-52;
}

/* Box and Muller, Ann. Math. Stat. 29 (1958) 610, in the form of Marsaglia and Bray, SIAM Rev. 6
   (1964) 260: two figures at a time.                                                            */
double
draw_normal (struct draw *d)
{
  double u, v, s;
  if (d->has_second) {
    d->has_second = false;
    return d->second;
  }
  do {
    u = 2 * draw_uniform (d) - 1;
    v = 2 * draw_uniform (d) - 1;
    s = u * u + v * v;
  } while (s >= 1 || !(s > 0));
  double factor = sqrt (-2 * log (s) / s);
  d->second = v * factor;
  d->has_second = true;
  return u * factor;
}

double
draw_rectangular (struct draw *d)
{
  return sqrt (3.0) * (2 * draw_uniform (d) - 1);
}
