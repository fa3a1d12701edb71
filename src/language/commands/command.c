#include "config.h"
#include "language/commands/commands.h"

#include <assert.h>
#include "result/result.h"
#include "support/fault.h"

static bool
quit (struct result *result)
{
  result->quit = true;
  return true;
}

bool
command_run (struct session *session, const struct statement *s, struct result *result,
             struct fault *fault)
{
  switch (s->kind) {
  case STATEMENT_GAS:
  case STATEMENT_STREAM:
  case STATEMENT_LET:
  case STATEMENT_REFERENCE:
    return command_define (session, s, result, fault);
  case STATEMENT_NORMALISE:
    return command_normalise (session, s, result, fault);
  case STATEMENT_SET:
    return command_set (session, s, result, fault);
  case STATEMENT_SHOW:
    return command_show (session, s, result, fault);
  case STATEMENT_TREND:
    return command_trend (session, s, result, fault);
  case STATEMENT_LIST:
    return command_list (session, s, result, fault);
  case STATEMENT_FORGET:
    return command_forget (session, s, result, fault);
  case STATEMENT_SAVE:
    return command_save (session, s, result, fault);
  case STATEMENT_OPEN:
    return command_open (session, s, result, fault);
  case STATEMENT_HELP:
    return command_help (session, s, result, fault);
  case STATEMENT_UNDO:
    return command_undo (session, s, result, fault);
  case STATEMENT_CHECK:
    return command_check (session, s, result, fault);
  case STATEMENT_SHEET:
  case STATEMENT_BALANCE:
    return block_open (session, s, fault);
  case STATEMENT_SOLVE:
    return command_solve (session, s, result, fault);
  case STATEMENT_MIX:
  case STATEMENT_SEPARATE:
  case STATEMENT_SPLIT:
  case STATEMENT_REACT:
  case STATEMENT_COMPONENTS:
  case STATEMENT_KNOWN:
  case STATEMENT_ABSENT:
  case STATEMENT_PER:
  case STATEMENT_AROUND:
  case STATEMENT_FIGURE:
    return block_add (session, s, fault);
  case STATEMENT_END:
    return block_close (session, s, result, fault);
  case STATEMENT_NOTE:
    return command_note (session, s, result, fault);
  case STATEMENT_WORKINGS:
    return command_workings (session, s, result, fault);
  case STATEMENT_TRIM:
    return command_trim (session, s, result, fault);
  case STATEMENT_QUIT:
    return quit (result);
  case STATEMENT_EMPTY:
    return true;
  case STATEMENT_ASK:
  case STATEMENT_MONTECARLO:
    break;
  }
  assert (s->kind == STATEMENT_EMPTY);           /* a question never comes here */
  return false;
}
