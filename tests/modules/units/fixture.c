#include "config.h"
#include "fixture.h"

#include <string.h>
#include "support/arena.h"

void
fixture_open (struct fixture *fixture, const char *directory)
{
  fixture->arena = arena_create ();
  fault_init (&fixture->fault, fixture->arena);
  fixture->table = unit_table_create (directory, &fixture->fault);
}

void
fixture_close (struct fixture *fixture)
{
  unit_table_destroy (fixture->table);
  arena_destroy (fixture->arena);
}

const struct unit *
fixture_find (struct fixture *fixture, const char *text)
{
  fault_init (&fixture->fault, fixture->arena);
  return unit_find (fixture->table, text, strlen (text), &fixture->fault);
}
