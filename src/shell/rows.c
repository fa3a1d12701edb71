#include "config.h"
#include "shell/rows.h"

#include <errno.h>
#include <stdint.h>
#include <string.h>

#include "shell/descriptor.h"
#include "shell/interrupt.h"
#include "shell/output.h"
#include "shell/script.h"
#include "support/arena.h"
#include "support/csv.h"
#include "support/fault.h"
#include "support/infile.h"
#include "support/number.h"
#include "support/reader.h"

/* One column; without a name it is passed over.  */
struct column { const char *name; bool is_number; };

struct rows {
  const char *file;
  struct arena *arena;                  /* of the whole file */
  struct csv csv;
  size_t count;
  struct column *columns;
};

/* A cell without blanks at its ends.  */
struct trimmed { const char *text; size_t n; };

static struct trimmed
trimmed (const struct csv_cell *cell)
{
  struct trimmed t = { cell->text, cell->length };

  while (t.n > 0 && t.text[0] == ' ') {
    t.text++;
    t.n--;
  }
  while (t.n > 0 && t.text[t.n - 1] == ' ')
    t.n--;
  return t;
}

/* Where ';' parts the cells a decimal comma is no delimiter.  */
static bool
number_of (const struct csv *csv, const struct csv_cell *cell, double *value)
{
  enum { LONGEST = 64 };
  char digits[LONGEST];
  bool too_large;
  const struct trimmed t = trimmed (cell);

  if (t.n == 0 || t.n >= LONGEST)
    return false;
  memcpy (digits, t.text, t.n);
  char *comma = csv->delimiter != ',' ? memchr (digits, ',', t.n) : NULL;
  if (comma != NULL)
    *comma = '.';
  const size_t sign = digits[0] == '-' || digits[0] == '+' ? 1 : 0;
  if (!number_read (digits + sign, t.n - sign, value, &too_large))
    return false;
  *value = digits[0] == '-' ? -*value : *value;
  return true;
}

/* The names, and which columns hold numbers.  */
static bool
read_columns (struct rows *rows, struct fault *fault)
{
  struct csv_row row;

  if (!csv_find_delimiter (&rows->csv, fault) || !csv_next (&rows->csv, rows->arena, &row, fault))
    return false;
  rows->count = row.count;
  rows->columns = ARENA_ARRAY (rows->arena, row.count, struct column);
  for (size_t i = 0; i < row.count; i++) {
    const struct trimmed t = trimmed (&row.cells[i]);
    const bool is_name = t.n > 0 && memchr (t.text, '"', t.n) == NULL
                         && memchr (t.text, '\n', t.n) == NULL;
    rows->columns[i].name = is_name ? arena_copy (rows->arena, t.text, t.n) : NULL;
  }
  struct csv ahead = rows->csv;
  struct arena *arena = arena_create ();
  while (!interrupt_pending () && csv_next (&ahead, arena, &row, fault)) {
    double value;
    for (size_t i = 0; i < row.count && i < rows->count; i++)
      if (!rows->columns[i].is_number && number_of (&ahead, &row.cells[i], &value))
        rows->columns[i].is_number = true;
    arena_reset (arena);
  }
  arena_destroy (arena);
  return fault->kind == MESSAGE_NONE;
}

static void
tell (struct script *script, const char *name, const struct fault *fault)
{
  output_fault (script->output, fault, &(struct report_origin) { .file = name, .line = "",
                                                                 .statement = "" });
  script->failed = true;
}

/* Runs TEXT as a line that stands where the row does.  */
static void
run_text (struct script *script, const struct rows *rows, const struct csv_row *row,
          const struct text *text)
{
  const struct script_line line = { .text = text->bytes, .n = text->length, .first = row->line,
                                    .file = rows->file };

  script_run_line (script, &line);
}

/* Gives the names of the columns the numbers of a row.  */
static bool
define_columns (struct script *script, const struct rows *rows, const struct csv_row *row,
                struct arena *arena)
{
  struct text line;
  double value;

  text_init (&line);
  for (size_t i = 0; i < rows->count && !script->failed; i++) {
    const struct column *column = &rows->columns[i];
    struct fault fault;

    if (column->name == NULL || !column->is_number)
      continue;
    if (i < row->count && number_of (&rows->csv, &row->cells[i], &value)) {
      text_empty (&line);
      text_add_format (&line, "let \"%s\" = %.17g", column->name, value);
      run_text (script, rows, row, &line);
      continue;
    }
    const struct csv_cell *cell = i < row->count ? &row->cells[i] : NULL;
    const struct trimmed t = cell != NULL ? trimmed (cell) : (struct trimmed) { "", 0 };
    fault_init (&fault, arena);
    fault_set_at (&fault, MESSAGE_KIND_WRONG,
                  (struct place) { row->line, cell != NULL ? cell->column : 1, 1 },
                  arena_format (arena, "%s has no number here: '%.*s'", column->name, (int) t.n,
                                t.text), NULL);
    tell (script, rows->file, &fault);
  }
  text_clear (&line);
  return !script->failed;
}

static void
run_row (struct script *script, const struct rows *rows, const struct csv_row *row,
         const struct text *statements)
{
  struct reader_string bytes = { statements->bytes, statements->length, 0 };
  struct reader reader = reader_of_string (&bytes, rows->file);
  struct arena *arena = arena_create_small ();
  struct text line;
  int first;

  text_init (&line);
  if (define_columns (script, rows, row, arena)) {
    while (!script->quit && !interrupt_pending () && (!script->failed || script->keep_going)
           && reader_next (&reader, &line, &first))
      run_text (script, rows, row, &line);
  }
  text_clear (&line);
  arena_destroy (arena);
}

static bool
is_blank (const struct csv_row *row)
{
  return row->count == 0 || (row->count == 1 && trimmed (&row->cells[0]).n == 0);
}

/* Every row by itself: what fails in one does not stop the next.  */
static void
run_rows (struct script *script, struct rows *rows, const struct text *statements,
          struct fault *fault)
{
  struct arena *arena = arena_create ();
  struct csv_row row;
  bool failed = script->failed;

  while (!script->quit && !interrupt_pending () && script->output->error == 0
         && csv_next (&rows->csv, arena, &row, fault)) {
    script->failed = false;
    if (!is_blank (&row))
      run_row (script, rows, &row, statements);
    failed = failed || script->failed;
    arena_reset (arena);
  }
  script->failed = failed;
  arena_destroy (arena);
}

void
rows_run (struct script *script, const char *name, const struct text *statements)
{
  struct rows rows = { .file = name, .arena = arena_create () };
  struct fault fault;
  struct text bytes;

  text_init (&bytes);
  fault_init (&fault, rows.arena);
  if (!infile_read (&(struct infile) { .name = name, .standard = true, .most = SIZE_MAX,
                                       .stop = interrupt_pending }, &bytes)) {
    output_file_fault (script->output, name, descriptor_reason (errno));
    script->failed = true;
  } else {
    if (csv_open (&rows.csv, rows.arena, name, bytes.bytes, bytes.length, &fault)) {
      rows.csv.remarks = true;
      if (read_columns (&rows, &fault))
        run_rows (script, &rows, statements, &fault);
    }
    if (fault.kind != MESSAGE_NONE)
      tell (script, name, &fault);
  }
  text_clear (&bytes);
  arena_destroy (rows.arena);
}
