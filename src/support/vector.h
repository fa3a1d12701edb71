/* Vectors of plain figures.  */
#ifndef SUPPORT_VECTOR_H
#define SUPPORT_VECTOR_H

#include <math.h>
#include <stddef.h>

static inline double
vector_dot (size_t n, const double a[], const double b[])
{
  double sum = 0;
  for (size_t k = 0; k < n; k++)
    sum += a[k] * b[k];
  return sum;
}

static inline double
vector_norm (size_t n, const double x[])
{
  return sqrt (vector_dot (n, x, x));
}

#endif
