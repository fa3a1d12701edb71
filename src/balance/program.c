#include "config.h"
#include "balance/program.h"

#include <assert.h>
#include <math.h>
#include <string.h>
#include "balance/dictionary.h"
#include "balance/null_space.h"
#include "support/arena.h"

struct program {
  struct arena *arena;
  const struct system *system;
  const double *v;
  const struct null_space *space;
  struct dictionary **dictionary;        /* by block */
  bool feasible;
};

struct program *
program_make (struct arena *arena, const struct system *system, const double v[],
              const struct null_space *space, bool (*interrupted) (void))
{
  struct program *program = ARENA_NEW (arena, struct program);
  struct dictionary_of of = { system, v, 0, space, NULL, interrupted };
  *program = (struct program) { arena, system, v, space, NULL, true };
  for (size_t j = 0; j < system->columns; j++) {
    of.unit = fmax (of.unit, fabs (v[j]));
  }
  of.unit = of.unit > 0 ? of.unit : 1;
  program->dictionary = ARENA_ARRAY (arena, space->blocks + 1, struct dictionary *);
  for (size_t b = 0; b < space->blocks; b++) {
    of.block = &space->block[b];
    program->dictionary[b] = dictionary_make (arena, &of);
    program->feasible = program->feasible && dictionary_feasible (program->dictionary[b]);
  }
  return program;
}

bool
program_feasible (const struct program *program)
{
  return program->feasible;
}

/* The terms of FORM that lie in block B, copied to TERMS.  */
static struct form
form_within (const struct program *program, const struct form *form, size_t b,
             struct term terms[])
{
  size_t count = 0;
  for (size_t t = 0; t < form->count; t++) {
    if (program->space->of[form->terms[t].column] == b) {
      terms[count++] = form->terms[t];
    }
  }
  return (struct form) { count, terms };
}

/* Does an earlier term of FORM than T lie in the same block?  */
static bool
is_done (const struct program *program, const struct form *form, size_t t)
{
  const size_t *of = program->space->of;
  for (size_t before = 0; before < t; before++) {
    if (of[form->terms[before].column] == of[form->terms[t].column]) {
      return true;
    }
  }
  return false;
}

static double
form_end (struct program *program, const struct form *form, double sign)
{
  double sum = 0;
  struct arena *scratch = arena_create_small ();
  struct term *terms = ARENA_ARRAY (scratch, form->count + 1, struct term);
  assert (program->feasible);
  for (size_t t = 0; t < form->count; t++) {
    size_t j = form->terms[t].column, b = program->space->of[j];
    if (b == NOWHERE) {
      sum += form->terms[t].coefficient * program->v[j];
    } else if (!is_done (program, form, t)) {
      struct form within = form_within (program, form, b, terms);
      sum += dictionary_end (program->dictionary[b], &within, sign);
    }
  }
  arena_destroy (scratch);
  return sum;
}

double
program_least (struct program *program, const struct form *form)
{
  return form_end (program, form, -1);
}

double
program_greatest (struct program *program, const struct form *form)
{
  return form_end (program, form, 1);
}

void
program_point (const struct program *program, double v[])
{
  memcpy (v, program->v, program->system->columns * sizeof *v);
  for (size_t b = 0; b < program->space->blocks; b++) {
    dictionary_point (program->dictionary[b], v);
  }
}

void
program_inside (const struct program *program, size_t seed, double v[])
{
  memcpy (v, program->v, program->system->columns * sizeof *v);
  for (size_t b = 0; b < program->space->blocks; b++) {
    dictionary_inside (program->dictionary[b], seed, v);
  }
}
