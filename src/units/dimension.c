#include "config.h"
#include "units/dimension.h"

#include <assert.h>
#include <limits.h>
#include <stddef.h>
#include <string.h>

/* Exponents of length, mass, time, temperature, amount.  */
#define NONE { 0, 0, 0, 0, 0 }
#define LENGTH { 1, 0, 0, 0, 0 }
#define MASS { 0, 1, 0, 0, 0 }
#define TIME { 0, 0, 1, 0, 0 }
#define TEMPERATURE { 0, 0, 0, 1, 0 }
#define AMOUNT { 0, 0, 0, 0, 1 }
#define VOLUME { 3, 0, 0, 0, 0 }
#define PRESSURE { -1, 1, -2, 0, 0 }
#define ENERGY { 2, 1, -2, 0, 0 }
#define POWER { 2, 1, -3, 0, 0 }
#define MASS_FLOW { 0, 1, -1, 0, 0 }
#define MOLAR_FLOW { 0, 0, -1, 0, 1 }
#define VOLUME_FLOW { 3, 0, -1, 0, 0 }
#define DENSITY { -3, 1, 0, 0, 0 }
#define MOLAR_DENSITY { -3, 0, 0, 0, 1 }
#define MOLAR_MASS { 0, 1, 0, 0, -1 }

const struct dimension DIMENSION_NONE = NONE, DIMENSION_LENGTH = LENGTH, DIMENSION_MASS = MASS,
  DIMENSION_TIME = TIME, DIMENSION_TEMPERATURE = TEMPERATURE, DIMENSION_AMOUNT = AMOUNT,
  DIMENSION_VOLUME = VOLUME, DIMENSION_PRESSURE = PRESSURE, DIMENSION_ENERGY = ENERGY,
  DIMENSION_POWER = POWER, DIMENSION_MASS_FLOW = MASS_FLOW, DIMENSION_MOLAR_FLOW = MOLAR_FLOW,
  DIMENSION_VOLUME_FLOW = VOLUME_FLOW, DIMENSION_DENSITY = DENSITY,
  DIMENSION_MOLAR_DENSITY = MOLAR_DENSITY, DIMENSION_MOLAR_MASS = MOLAR_MASS;

/* The first name of a dimension is the one it is called by; an energy per volume is told as a
   pressure, whose dimension it has.                                                           */
static const struct { const char *name; struct dimension dimension; } quantities[] = {
  { "share", NONE },
  { "relative humidity", NONE },
  { "reference oxygen", NONE },
  { "length", LENGTH },
  { "area", { 2, 0, 0, 0, 0 } },
  { "volume", VOLUME },
  { "mass", MASS },
  { "time", TIME },
  { "temperature", TEMPERATURE },
  { "amount", AMOUNT },
  { "pressure", PRESSURE },
  { "energy per volume", PRESSURE },
  { "force", { 1, 1, -2, 0, 0 } },
  { "energy", ENERGY },
  { "power", POWER },
  { "mass per time", MASS_FLOW },
  { "amount per time", MOLAR_FLOW },
  { "volume per time", VOLUME_FLOW },
  { "mass per volume", DENSITY },
  { "amount per volume", MOLAR_DENSITY },
  { "mass per amount", MOLAR_MASS },
  { "volume per amount", { 3, 0, 0, 0, -1 } },
  { "volume per mass", { 3, -1, 0, 0, 0 } },
  { "amount per mass", { 0, -1, 0, 0, 1 } },
  { "energy per mass", { 2, 0, -2, 0, 0 } },
  { "energy per amount", { 2, 1, -2, 0, -1 } },
  { "heat capacity per mass", { 2, 0, -2, -1, 0 } },
  { "heat capacity per amount", { 2, 1, -2, -1, -1 } },
  { "heat capacity per volume", { -1, 1, -2, -1, 0 } },
  { "heat capacity", { 2, 1, -2, -1, 0 } },
  { "dynamic viscosity", { -1, 1, -1, 0, 0 } },
  { "kinematic viscosity", { 2, 0, -1, 0, 0 } },
  { "speed", { 1, 0, -1, 0, 0 } },
  { "acceleration", { 1, 0, -2, 0, 0 } },
  { "power per area", { 0, 1, -3, 0, 0 } },
  { "mass per area", { -2, 1, 0, 0, 0 } },
  { "mass per area and time", { -2, 1, -1, 0, 0 } },
  { "amount per area and time", { -2, 0, -1, 0, 1 } },
  { "thermal conductivity", { 1, 1, -3, -1, 0 } },
  { "heat transfer coefficient", { 0, 1, -3, -1, 0 } },
  { "surface tension", { 0, 1, -2, 0, 0 } },
  { "rate", { 0, 0, -1, 0, 0 } },
};

static const size_t quantity_count = sizeof quantities / sizeof quantities[0];

static signed char
narrowed (int exponent)
{
  assert (exponent >= SCHAR_MIN && exponent <= SCHAR_MAX);
  return (signed char) exponent;
}

struct dimension
dimension_times (struct dimension a, struct dimension b)
{
  return (struct dimension) { narrowed (a.length + b.length), narrowed (a.mass + b.mass),
                              narrowed (a.time + b.time),
                              narrowed (a.temperature + b.temperature),
                              narrowed (a.amount + b.amount) };
}

struct dimension
dimension_over (struct dimension a, struct dimension b)
{
  return dimension_times (a, dimension_power (b, -1));
}

struct dimension
dimension_power (struct dimension d, int n)
{
  return (struct dimension) { narrowed (d.length * n), narrowed (d.mass * n),
                              narrowed (d.time * n), narrowed (d.temperature * n),
                              narrowed (d.amount * n) };
}

bool
dimension_is_none (struct dimension d)
{
  return dimension_equal (d, DIMENSION_NONE);
}

const char *
dimension_name (struct dimension d)
{
  for (size_t i = 0; i < quantity_count; i++)
    if (dimension_equal (quantities[i].dimension, d))
      return quantities[i].name;
  return NULL;
}

bool
dimension_find (const char *name, struct dimension *d)
{
  for (size_t i = 0; i < quantity_count; i++)
    if (strcmp (quantities[i].name, name) == 0) {
      *d = quantities[i].dimension;
      return true;
    }
  return false;
}
