#include "config.h"
#include "eos/cover.h"

#include <string.h>

#include "eos/eos.h"
#include "gas/composition.h"
#include "gas/species.h"

/* Keys are compared as they lie in memory, eight bytes at once.  */
int
cover_find (const struct cover *cover, const char *key)
{
  const size_t n = strlen (key);
  char wanted[COVER_KEY] = "";

  if (n >= sizeof wanted) {
    return -1;
  }
  memcpy (wanted, key, n);
  for (size_t i = 0; i < cover->count; i++) {
    if (memcmp (wanted, cover->keys + i * cover->stride, sizeof wanted) == 0) {
      return (int) i;
    }
  }
  return -1;
}

double
cover_left_out (const struct cover *cover, const struct composition *composition)
{
  double sum = 0;

  for (size_t i = 0; i < composition->count; i++) {
    if (cover_find (cover, composition->species[i]->key) < 0) {
      sum += composition->fraction[i];
    }
  }
  return sum;
}

bool
cover_all (const struct cover *cover, const struct composition *composition,
           const char **lacking)
{
  *lacking = NULL;
  for (size_t i = 0; i < composition->count && *lacking == NULL; i++) {
    if (cover_find (cover, composition->species[i]->key) < 0) {
      *lacking = composition->species[i]->key;
    }
  }
  return *lacking == NULL || cover_left_out (cover, composition) < EOS_TRACES;
}

void
cover_fractions (const struct cover *cover, const struct composition *composition, double x[])
{
  double sum = 0;

  for (size_t i = 0; i < cover->count; i++) {
    x[i] = 0;
  }
  for (size_t i = 0; i < composition->count; i++) {
    const int at = cover_find (cover, composition->species[i]->key);
    if (at >= 0) {
      x[at] += composition->fraction[i];
    }
  }
  for (size_t i = 0; i < cover->count; i++) {
    sum += x[i];
  }
  for (size_t i = 0; i < cover->count; i++) {
    x[i] /= sum;
  }
}
