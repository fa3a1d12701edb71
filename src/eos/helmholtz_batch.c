/* Densities of many states of one mixture, eight at a time, by what the processor has: AVX-512,
   AVX2, or whatever the compiler was told.  States near or below the critical temperature, where
   isotherms may have loops, and those the steps did not settle, go the way of single states.    */
#include "config.h"
#include "eos/helmholtz.h"

#include <math.h>

enum { LANES_COUNT = 8, LANES_STEPS = 12 };

#if defined __GNUC__

/* Vectors are handed on by address only, so that how they are passed by value does not matter.  */
#if !defined __clang__
#pragma GCC diagnostic ignored "-Wpsabi"
#endif

typedef double lane __attribute__ ((vector_size (8 * LANES_COUNT)));
typedef unsigned long long lane_bits __attribute__ ((vector_size (8 * LANES_COUNT)));
typedef long long lane_signed __attribute__ ((vector_size (8 * LANES_COUNT)));

#define LANES_STEP_LAST 2e-6
#define LOG2_E 1.4426950408889634
/* ln 2 in two parts; the first has its last 21 bits clear, so that whole multiples are exact.  */
#define LN2_HIGH 0x1.62e42fee00000p-1
#define LN2_LOW 0x1.a39ef35793c76p-33
#define ROUNDER 0x1.8p52
#define SQRT_HALF_BITS 0x3fe6a09e667f3bcdULL
#define MANTISSA_BITS 0x000fffffffffffffULL

/* A where MASK is set, else B.  */
#define PICK(mask, a, b)                                                                 \
  ((lane) (((lane_bits) (mask) & (lane_bits) (a)) | (~(lane_bits) (mask) & (lane_bits) (b))))

struct lane_tau_powers {
  lane whole[HELMHOLTZ_WHOLE_MOST - HELMHOLTZ_WHOLE_LEAST + 1];
  lane part[HELMHOLTZ_PARTS];
};

struct lane_delta_powers {
  lane of[HELMHOLTZ_POWERS], e1[HELMHOLTZ_K1], e2[HELMHOLTZ_K2];
};

struct lane_group {
  const struct helmholtz_exponent *phi;
  int lowest, highest;
  lane c[HELMHOLTZ_POWERS];
};

struct lane_isotherm {
  int count;
  struct lane_group groups[HELMHOLTZ_GROUPS];
};

#define LANES(name) lanes_plain_##name
#define LANES_TARGET
#include "eos/helmholtz_lanes.def"
#undef LANES
#undef LANES_TARGET

#if defined __x86_64__
#define LANES(name) lanes_avx2_##name
#define LANES_TARGET __attribute__ ((target ("avx2")))
#include "eos/helmholtz_lanes.def"
#undef LANES
#undef LANES_TARGET

#define LANES(name) lanes_avx512_##name
#define LANES_TARGET __attribute__ ((target ("avx512f,avx512dq,avx512vl")))
#include "eos/helmholtz_lanes.def"
#undef LANES
#undef LANES_TARGET
#endif

typedef void lanes_densities (const struct helmholtz_mixture *, const lane *tau, const lane *pi,
                              lane *delta);

static lanes_densities *
lanes_best (enum helmholtz_lanes wanted)
{
#if defined __x86_64__
  if (wanted >= HELMHOLTZ_LANES_AVX512 && __builtin_cpu_supports ("avx512f")
      && __builtin_cpu_supports ("avx512dq") && __builtin_cpu_supports ("avx512vl")) {
    return lanes_avx512_densities;
  }
  if (wanted >= HELMHOLTZ_LANES_AVX2 && __builtin_cpu_supports ("avx2")) {
    return lanes_avx2_densities;
  }
#endif
  (void) wanted;
  return lanes_plain_densities;
}

/* N, at most LANES_COUNT, states; lanes beyond repeat the last.  */
static void
solve_lanes (lanes_densities *densities, const struct helmholtz_mixture *mixture, size_t n,
             const double T[], const double p[], double rho[])
{
  lane tau, pi, delta;

  for (size_t k = 0; k < LANES_COUNT; k++) {
    const size_t i = k < n ? k : n - 1;
    tau[k] = mixture->T_r / T[i];
    pi[k] = p[i] / (mixture->rho_r * mixture->gas_constant * T[i]);
  }
  densities (mixture, &tau, &pi, &delta);
  for (size_t k = 0; k < n; k++) {
    rho[k] = delta[k] * mixture->rho_r;
  }
}

#endif

static double
solve_alone (const struct helmholtz_mixture *mixture, double T, double p)
{
  struct helmholtz_isotherm line;

  if (!(isfinite (T) && T > 0 && isfinite (p) && p > 0)) {
    return (double) NAN;
  }
  helmholtz_set_isotherm (mixture, T, &line);
  return helmholtz_roots (&line, p).gas;
}

void
helmholtz_densities (const struct helmholtz_mixture *mixture, enum helmholtz_lanes wanted,
                     const struct state_list *states, double rho[])
{
#if defined __GNUC__
  lanes_densities *const densities = lanes_best (wanted);

  for (size_t i = 0; i < states->count; i += LANES_COUNT) {
    const size_t left = states->count - i;
    solve_lanes (densities, mixture, left < LANES_COUNT ? left : LANES_COUNT, states->T + i,
                 states->p + i, rho + i);
  }
#else
  (void) wanted;
  for (size_t i = 0; i < states->count; i++) {
    rho[i] = (double) NAN;
  }
#endif
  for (size_t i = 0; i < states->count; i++) {
    if (!isfinite (rho[i])) {
      rho[i] = solve_alone (mixture, states->T[i], states->p[i]);
    }
  }
}
