#include "config.h"
#include "modules/language/typed.h"

#include <stdbool.h>
#include <stddef.h>
#include <string.h>
#include "language/parse.h"
#include "language/session.h"
#include "language/tree.h"
#include "libtest.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"

void
with_session (void (*each) (struct arena *, struct session *))
{
  struct arena *arena = arena_create ();
  struct fault fault;
  struct session *session;
  fault_init (&fault, arena);
  session = session_create (&(struct session_options) { NULL, NULL }, &fault);
  if (CHECK (session != NULL)) {
    each (arena, session);
  }
  session_destroy (session);
  arena_destroy (arena);
}

const struct result *
typed (struct arena *arena, struct session *session, const char *text)
{
  struct result *result = NULL;
  struct parser *parser = parser_create (arena, session_vocabulary (session), text, strlen (text),
                                         1, BLOCK_NONE);
  struct statement *s;
  struct fault fault;
  fault_init (&fault, arena);
  while (parser_next (parser, &s, &fault) && s) {
    result = ARENA_NEW (arena, struct result);
    result_init (result, arena, s->source);
    if (!CHECK (session_run (session, s, result, &fault))) {
      return NULL;
    }
  }
  return CHECK (fault.kind == MESSAGE_NONE) ? result : NULL;
}
