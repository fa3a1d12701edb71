#include "config.h"
#include "language/session_private.h"

#include <string.h>
#include "language/kept.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/memory.h"
#include "support/text.h"

/* ---- The lines so far ---- */

static void
keep_line (struct open_block *b, const struct statement *s)
{
  if (b->count == b->room) {
    b->room = b->room ? 2 * b->room : 16;
    b->at = memory_resize (b->at, b->room, sizeof *b->at);
    b->line = memory_resize (b->line, b->room, sizeof *b->line);
  }
  b->at[b->count] = s->at;
  b->line[b->count] = arena_string (b->arena, s->source);
  b->count++;
}

/* What a sheet is of is looked at as it is typed.  */
static bool
is_of_gas (struct session *session, const struct statement *s, struct fault *fault)
{
  struct evaluation ev;
  struct value value;
  evaluation_init (&ev, session, NULL, fault);
  if (!evaluate (&ev, s->value, NULL, &value)) {
    fault_place (fault, s->value->at);
    return false;
  }
  return value.kind == VALUE_GAS || value.kind == VALUE_STREAM
         || fault_set_at (fault, MESSAGE_KIND_WRONG, s->value->at,
                          "a sheet is of a gas or of a stream", NULL);
}

bool
block_open (struct session *session, const struct statement *s, struct fault *fault)
{
  struct open_block *b = &session->block;
  if (b->arena) {
    return fault_set_at (fault, MESSAGE_BLOCK_LINE, s->at, s->source,
                         "a block is open: close it with end");
  }
  if (s->kind == STATEMENT_SHEET && !is_of_gas (session, s, fault)) {
    return false;
  }
  *b = (struct open_block) { .arena = arena_create (),
                             .kind = s->kind == STATEMENT_SHEET ? BLOCK_SHEET : BLOCK_BALANCE };
  b->name = arena_string (b->arena, s->name);
  b->name_at = s->name_at;
  keep_line (b, s);
  return true;
}

void
block_drop (struct session *session)
{
  struct open_block *b = &session->block;
  arena_destroy (b->arena);
  memory_release (b->at);
  memory_release (b->line);
  *b = (struct open_block) { .arena = NULL };
}

/* The whole block as one source: a statement a line.  */
static const char *
block_source (const struct open_block *b, const struct statement *end, struct arena *arena)
{
  struct text source;
  text_init (&source);
  for (size_t i = 0; i < b->count; i++) {
    text_add (&source, b->line[i]);
    text_add (&source, ";\n");
  }
  text_add (&source, end->source);
  const char *whole = arena_copy (arena, source.bytes, source.length);
  text_clear (&source);
  return whole;
}

/* ---- Faults ---- */

static int
lines_in (const char *text)
{
  int lines = 1;
  for (; *text; text++) {
    lines += *text == '\n';
  }
  return lines;
}

static void
quote_line (const struct open_block *b, size_t i, struct fault *fault)
{
  fault_quote (fault, arena_format (fault->arena, "%*s%.*s", b->at[i].first - 1, "",
                                    (int) strcspn (b->line[i], "\n"), b->line[i]));
}

/* A place in the source of a block is that of one of its lines, which was typed earlier and may
   have gone on over several.                                                                    */
void
block_place (struct session *session, struct fault *fault)
{
  struct open_block *b = &session->block;
  int line = fault->at.line > 0 ? fault->at.line : 1;
  size_t i = 0;
  while (i < b->count && line > lines_in (b->line[i])) {
    line -= lines_in (b->line[i++]);
  }
  b->at_fault = 0;
  if (!b->arena || i >= b->count) {
    return;
  }
  b->at_fault = i;
  int shift = line == 1 ? b->at[i].first - 1 : 0;
  fault->at.line = b->at[i].line + line - 1;
  fault->at.first += shift;
  fault->at.last += shift;
  if (line == 1) {
    quote_line (b, i, fault);
  }
}

/* ---- Taking lines back ---- */

static void
leave_out (struct open_block *b, size_t i)
{
  b->count--;
  memmove (b->line + i, b->line + i + 1, (b->count - i) * sizeof *b->line);
  memmove (b->at + i, b->at + i + 1, (b->count - i) * sizeof *b->at);
}

void
block_undo (struct session *session, struct result *result)
{
  struct open_block *b = &session->block;
  result_remark (result, MESSAGE_NOTE_UNDONE,
                 arena_string (result->arena, b->line[b->count - 1]), NULL);
  leave_out (b, b->count - 1);
  if (b->count == 0) {
    block_drop (session);
  }
}

bool
session_reopened (struct session *session, struct result *result)
{
  const struct open_block *b = &session->block;
  if (!b->arena) {
    return false;
  }
  result_remark (result, MESSAGE_NOTE_BLOCK_OPEN, arena_string (result->arena, b->name),
                 b->at_fault > 0 ? "without that line: type it anew" : "with all its lines");
  return true;
}

/* ---- The lines, and the end ---- */

/* Would the sheet hold if it ended here?  A figure that cannot be is refused as it is typed.  */
static bool
holds_so_far (struct session *session, struct fault *fault)
{
  struct statement end = { .kind = STATEMENT_END, .source = "end" };
  const char *source = block_source (&session->block, &end, fault->arena);
  struct definition *d = definition_make (session, source, NAME_SHEET, fault);
  bool done = d && definition_refresh (session, d, fault);
  definition_release (d);
  return done;
}

/* What fails of a line is in that line, be it that the gas it is of has no such thing.  */
static void
place_in_line (const struct statement *s, struct fault *fault)
{
  const struct place line = s->claim ? s->claim->at : s->at;
  const bool before = fault->at.line < line.line
                      || (fault->at.line == line.line && fault->at.first < s->at.first);
  if (before) {
    fault->at = line;
  }
}

bool
block_add (struct session *session, const struct statement *s, struct fault *fault)
{
  struct open_block *b = &session->block;
  if (!b->arena) {
    return fault_set_at (fault, MESSAGE_BLOCK_LINE, s->at, s->source, "no block is open");
  }
  keep_line (b, s);
  if (b->kind == BLOCK_SHEET && !holds_so_far (session, fault)) {
    block_place (session, fault);
    fault_quote (fault, NULL);
    place_in_line (s, fault);
    b->count--;
    return false;
  }
  return true;
}

/* The streams the balance made so far go with it, but for those that others lean on.  */
void
balance_drop_made (struct session *session, const char *balance)
{
  for (size_t i = session->count; i-- > 0;) {
    struct definition *d = session->order[i], **leaning;
    if (!d->maker || strcmp (d->maker, balance) != 0) {
      continue;
    }
    struct arena *arena = arena_create ();
    if (names_leaning (session, arena, d->name, &leaning) == 0) {
      size_t place = name_place (session, d->name, NULL, 0);
      undo_note (session, d->name, d, NULL, place, NULL);
      definition_release (d);
    }
    arena_destroy (arena);
  }
}

void
balance_remember (struct session *session, const char *name)
{
  char *copy = memory_get (strlen (name) + 1, 1);
  memcpy (copy, name, strlen (name) + 1);
  memory_release (session->last_balance);
  session->last_balance = copy;
}

static bool
close_balance (struct session *session, const struct statement *end, struct result *result,
               struct fault *fault)
{
  struct open_block *b = &session->block;
  struct statement from = { .kind = STATEMENT_BALANCE, .name_at = b->name_at,
                            .name = arena_string (fault->arena, b->name),
                            .source = b->line[0], .at = b->at[0] };
  const char *source = block_source (b, end, fault->arena);
  undo_group_open (session);
  balance_drop_made (session, b->name);
  if (!name_define (session, &from, source, NAME_BALANCE, result, fault)) {
    undo_group_drop (session);
    return false;
  }
  undo_group_close (session);
  balance_remember (session, b->name);
  return true;
}

bool
block_close (struct session *session, const struct statement *end, struct result *result,
             struct fault *fault)
{
  struct open_block *b = &session->block;
  bool done;
  if (!b->arena) {
    return fault_set_at (fault, MESSAGE_BLOCK_LINE, end->at, end->source, "no block is open");
  }
  b->at_fault = 0;
  if (b->spoilt) {
    return fault_set_at (fault, MESSAGE_BLOCK_SPOILT, end->at,
                         arena_string (fault->arena, b->name), NULL);
  }
  if (b->kind == BLOCK_BALANCE) {
    done = close_balance (session, end, result, fault);
    if (!done && !fault->quote) {
      quote_line (b, 0, fault);
    }
  } else {
    struct statement from = { .kind = STATEMENT_SHEET, .name_at = b->name_at,
                              .name = arena_string (fault->arena, b->name),
                              .source = b->line[0], .at = b->at[0] };
    done = name_define (session, &from, block_source (b, end, fault->arena), NAME_SHEET, result,
                        fault);
    if (!done && !fault->quote) {
      quote_line (b, 0, fault);         /* the name's fault: another leans on it */
    }
  }
  if (!done) {
    if (b->at_fault > 0) {
      leave_out (b, b->at_fault);
    }
    return false;
  }
  for (size_t i = 0; i < b->count; i++) {
    kept_log (session, b->line[i], false);
  }
  block_drop (session);
  return true;
}
