#include "config.h"
#include "language/commands/commands.h"

#include <errno.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/outfile.h"
#include "support/text.h"

/* One statement on one line: line breaks become blanks, remarks inside are left out.  */
static void
add_statement (struct text *out, const char *source)
{
  bool quoted = false, remark = false;
  for (const char *s = source; *s; s++) {
    quoted = *s == '"' && !remark ? !quoted : quoted;
    remark = *s == '\n' ? false : remark || (*s == '#' && !quoted);
    if (*s == '\n') {
      text_add_char (out, ' ');
    } else if (!remark) {
      text_add_char (out, *s);
    }
  }
  text_add_char (out, '\n');
}

/* A balance line by line, and solved if it was, so that its streams are there for what follows.  */
static void
add_block (const struct session *s, const struct definition *d, struct text *out)
{
  const struct statement *line = d->statement;
  bool solved = false;
  for (; line && line->kind != STATEMENT_END; line = line->next) {
    text_add (out, line == d->statement ? "" : "  ");
    add_statement (out, line->source);
  }
  text_add (out, "end\n");
  for (size_t i = 0; i < s->count && !solved; i++) {
    solved = s->order[i]->maker && strcmp (s->order[i]->maker, d->name) == 0;
  }
  if (solved) {
    text_add_format (out, "solve %s\n",
                     d->statement->source + strcspn (d->statement->source, " ") + 1);
  }
}

/* A definition behind those it needs.  WRITTEN marks the ones done.  */
static void
add_definition (const struct session *s, size_t i, bool written[], struct text *out)
{
  const struct definition *d = s->order[i];
  written[i] = true;
  for (size_t k = 0; k < s->count; k++)
    for (size_t n = 0; !written[k] && n < d->need_count; n++)
      if (strcmp (s->order[k]->name, d->needs[n]) == 0) {
        add_definition (s, k, written, out);
      }
  if (d->kind == NAME_BALANCE) {
    add_block (s, d, out);
  } else if (!d->maker) {
    add_statement (out, d->source);
  }
}

/* A session as plain statements, settings first, in an order that can be run again.  */
static void
session_write (const struct session *s, struct text *out)
{
  struct arena *arena = arena_create ();
  bool *written = ARENA_ARRAY (arena, s->count, bool);
  for (int i = 0; i < SETTING_COUNT; i++)
    if (s->settings.source[i] && i != SETTING_LOWER_FLAMMABLE_LIMIT) {
      add_statement (out, s->settings.source[i]);
    }
  for (const struct stated_limit *limit = s->settings.limits; limit; limit = limit->next) {
    add_statement (out, limit->source);
  }
  /* A family may be set at reference conditions that have a name: those come first.  */
  for (size_t i = 0; i < s->count; i++)
    if (s->order[i]->kind == NAME_REFERENCE && !written[i]) {
      add_definition (s, i, written, out);
    }
  for (int i = 0; i < FAMILY_COUNT; i++)
    if (s->settings.family[i].source) {
      add_statement (out, s->settings.family[i].source);
    }
  for (size_t i = 0; i < s->count; i++)
    if (!written[i]) {
      add_definition (s, i, written, out);
    }
  arena_destroy (arena);
}

static bool
write_file (const char *path, const struct text *text)
{
  struct outfile file;
  if (!outfile_open (&file, path)) {
    return false;
  }
  FILE *stream = fdopen (dup (file.fd), "w");
  bool done = stream && fwrite (text->bytes, 1, text->length, stream) == text->length;
  int reason = errno;
  if (stream && fclose (stream) != 0 && done) {
    done = false;
    reason = errno;
  }
  if (!done) {
    outfile_drop (&file);
    errno = reason;
    return false;
  }
  return outfile_keep (&file);
}

bool
command_save (struct session *session, const struct statement *s, struct result *result,
              struct fault *fault)
{
  struct text text;
  if (!*s->text) {
    return fault_set_at (fault, MESSAGE_TEXT_EXPECTED, s->text_at, "a file has a name", NULL);
  }
  text_init (&text);
  text_add (&text, "# gaswright\n");
  session_write (session, &text);
  bool done = write_file (s->text, &text);
  text_clear (&text);
  if (!done) {
    return fault_set_at (fault, MESSAGE_FILE, s->text_at, s->text, strerror (errno));
  }
  result_remark (result, MESSAGE_NOTE_SAVED, s->text, NULL);
  return true;
}
