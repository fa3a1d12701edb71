#include "config.h"
#include "balance/network.h"

size_t
network_extent (const struct network *network, size_t boundary)
{
  size_t column = network->streams * network->components;
  for (size_t b = 0; b < boundary; b++) {
    column += network->boundary[b].reaction_count;
  }
  return column;
}

size_t
network_columns (const struct network *network)
{
  return network_extent (network, network->boundaries);
}

double
form_value (const struct form *form, const double v[])
{
  double sum = 0;
  for (size_t i = 0; i < form->count; i++) {
    sum += form->terms[i].coefficient * v[form->terms[i].column];
  }
  return sum;
}
