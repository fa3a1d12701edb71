/* Prints factor and offset of the units named on its lines of input, for libraries.sh.  */
#include "config.h"

#include <stdio.h>
#include <string.h>
#include "fixture.h"

int
main (void)
{
  struct fixture fixture;
  char line[200];

  fixture_open (&fixture, NULL);
  while (fixture.table != NULL && fgets (line, sizeof line, stdin) != NULL) {
    line[strcspn (line, "\n")] = '\0';
    const struct unit *unit = fixture_find (&fixture, line);
    if (unit != NULL)
      printf ("%s\t%.17g\t%.17g\n", line, unit->factor, unit->offset);
  }
  fixture_close (&fixture);
  return 0;
}
