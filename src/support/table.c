#include "config.h"
#include "support/table.h"

#include <assert.h>
#include <errno.h>
#include <math.h>
#include <stdio.h>
#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/number.h"
#include "support/text.h"

/* Columns are named by the built-in table.  Cells stand row by row in one array; a user's file may
   bring its columns in another order and leave some out: those cells are empty.                 */
struct table {
  struct arena *arena;
  const char *name;
  size_t columns, rows, built_in_rows;
  const char **names;                     /* of the columns */
  const char **cells;
  const char *users_file;                 /* its path; null: there is none */
  int *users_lines;                       /* of the rows behind the built-in ones */
};

const struct table_text *
table_text_find (const char *name)
{
  for (const struct table_text *text = table_built_in; text->name != NULL; text++)
    if (strcmp (text->name, name) == 0)
      return text;
  return NULL;
}

size_t
table_rows (const struct table *table)
{
  return table->rows;
}

int
table_column (const struct table *table, const char *name)
{
  for (size_t i = 0; i < table->columns; i++)
    if (strcmp (table->names[i], name) == 0)
      return (int) i;
  return -1;
}

const char *
table_cell (const struct table *table, size_t row, int column)
{
  assert (row < table->rows && column < (int) table->columns);
  return column < 0 ? "" : table->cells[row * table->columns + (size_t) column];
}

bool
table_row_is_users (const struct table *table, size_t row)
{
  return row >= table->built_in_rows;
}

static bool
complain (const char *file, const char *line, const char *what, struct fault *fault)
{
  fault_set (fault, MESSAGE_TABLE_ROW, file, line);
  fault_facts (fault, what, NULL);
  return false;
}

/* The program's own rows are told by their key, a user's by file and line.  */
bool
table_complain (const struct table *table, size_t row, const char *what, struct fault *fault)
{
  if (table_row_is_users (table, row)) {
    int line = table->users_lines[row - table->built_in_rows];

    return complain (table->users_file, arena_format (table->arena, "%d", line), what, fault);
  }
  return complain (arena_format (table->arena, "%s.tsv", table->name),
                   table_cell (table, row, 0), what, fault);
}

bool
table_number (const struct table *table, size_t row, int column, double *value,
              struct fault *fault)
{
  const char *cell = table_cell (table, row, column);
  bool negative = cell[0] == '-';
  const char *digits = cell + (negative ? 1 : 0);
  double number;
  bool too_large;

  if (cell[0] == '\0') {
    *value = (double) NAN;
    return true;
  }
  if (!number_read (digits, strlen (digits), &number, &too_large))
    return table_complain (table, row,
                           arena_format (table->arena, "'%s' in column %s is %s", cell,
                                         table->names[column],
                                         too_large ? "too large a number" : "no number"), fault);
  *value = negative ? -number : number;
  return true;
}

/* Reading.  */

/* Cuts LINE, which is changed, at its tabs; the first MOST cells go into CELLS.  Returns how many
   there are.                                                                                   */
static size_t
cut (char *line, size_t length, size_t most, const char **cells)
{
  char *end = line + length;
  size_t count = 0;

  for (;;) {
    char *tab = memchr (line, '\t', (size_t) (end - line));

    if (count < most)
      cells[count] = line;
    count++;
    if (tab == NULL)
      return count;
    *tab = '\0';
    line = tab + 1;
  }
}

static size_t
count_cells (const char *line)
{
  size_t count = 1;

  while ((line = strchr (line, '\t')) != NULL) {
    count++;
    line++;
  }
  return count;
}

/* What is wrong with a row of COUNT cells, or null.  */
static const char *
row_defect (struct arena *arena, const char *const *cells, size_t count, size_t columns)
{
  const char *source;

  if (count != columns)
    return arena_format (arena, "%zu cells where the heading has %zu", count, columns);
  if (cells[0][0] == '\0')
    return "no key in the first column";
  source = cells[columns - 1];
  if (source[strspn (source, " ")] == '\0')
    return "no source";
  return NULL;
}

static const char **
row_cells (const struct table *table, size_t row)
{
  return table->cells + row * table->columns;
}

/* The built-in rows, with room for USERS_ROWS more behind them.  */
static bool
read_built_in (struct table *table, const struct table_text *text, size_t users_rows,
               struct fault *fault)
{
  const char *const *lines = text->rows;
  size_t count = 0;

  while (lines[count + 1] != NULL)
    count++;
  table->columns = count_cells (lines[0]);
  table->names = ARENA_ARRAY (table->arena, table->columns, const char *);
  cut (arena_string (table->arena, lines[0]), strlen (lines[0]), table->columns, table->names);
  table->cells = ARENA_ARRAY (table->arena, (count + users_rows) * table->columns, const char *);
  table->users_lines = ARENA_ARRAY (table->arena, users_rows, int);
  table->built_in_rows = count;
  for (size_t row = 0; row < count; row++) {
    size_t length = strlen (lines[row + 1]);
    const char **cells = row_cells (table, row);
    size_t found = cut (arena_copy (table->arena, lines[row + 1], length), length,
                        table->columns, cells);
    const char *defect = row_defect (table->arena, cells, found, table->columns);

    table->rows++;
    if (defect != NULL)
      return table_complain (table, row, defect, fault);
  }
  return true;
}

/* A user's file while it is read.  */
struct users_text {
  const char *path;
  char *next, *end;                       /* what is left of it, in the table's arena */
  int line;
  size_t columns;                         /* of its heading; 0 before that was read */
  size_t *place;                          /* of each of its columns among the table's */
  const char **cells;                     /* of the row at hand */
};

static bool
users_complain (const struct table *table, const struct users_text *users, const char *what,
                struct fault *fault)
{
  return complain (users->path, arena_format (table->arena, "%d", users->line), what, fault);
}

static bool
read_heading (struct table *table, struct users_text *users, char *line, size_t length,
              struct fault *fault)
{
  size_t count = count_cells (line);
  bool *taken = ARENA_ARRAY (table->arena, table->columns, bool);

  users->columns = count;
  users->place = ARENA_ARRAY (table->arena, count, size_t);
  users->cells = ARENA_ARRAY (table->arena, count, const char *);
  cut (line, length, count, users->cells);
  for (size_t i = 0; i < count; i++) {
    int column = table_column (table, users->cells[i]);
    const char *wrong = column < 0 ? "has no column" : "has two columns";

    if (column < 0 || taken[column])
      return users_complain (table, users,
                             arena_format (table->arena, "the table %s %s '%s'", table->name,
                                           wrong, users->cells[i]), fault);
    taken[column] = true;
    users->place[i] = (size_t) column;
  }
  if (users->place[0] != 0)
    return users_complain (table, users,
                           arena_format (table->arena, "the first column is not '%s'",
                                         table->names[0]), fault);
  if (users->place[count - 1] != table->columns - 1)
    return users_complain (table, users, "the last column is not 'source'", fault);
  return true;
}

static bool
read_users_row (struct table *table, struct users_text *users, char *line, size_t length,
                struct fault *fault)
{
  size_t found = cut (line, length, users->columns, users->cells);
  const char *defect = row_defect (table->arena, users->cells, found, users->columns);
  const char **cells = row_cells (table, table->rows);

  if (defect != NULL)
    return users_complain (table, users, defect, fault);
  for (size_t i = 0; i < table->columns; i++)
    cells[i] = "";
  for (size_t i = 0; i < users->columns; i++)
    cells[users->place[i]] = users->cells[i];
  table->users_lines[table->rows - table->built_in_rows] = users->line;
  table->rows++;
  return true;
}

/* Cuts the next line off, without its end.  */
static char *
users_next_line (struct users_text *users, size_t *length)
{
  char *line = users->next;
  char *end = memchr (line, '\n', (size_t) (users->end - line));

  users->line++;
  users->next = end != NULL ? end + 1 : users->end;
  if (end == NULL)
    end = users->end;
  if (end > line && end[-1] == '\r')
    end--;
  *end = '\0';
  *length = (size_t) (end - line);
  return line;
}

static bool
read_users_rows (struct table *table, struct users_text *users, struct fault *fault)
{
  while (users->next < users->end) {
    size_t length;
    char *line = users_next_line (users, &length);

    if (memchr (line, '\0', length) != NULL || utf8_first_bad (line, length) < length)
      return users_complain (table, users, "this is not UTF-8 text", fault);
    if (length == 0 || line[0] == '#')
      continue;
    if (!(users->columns == 0 ? read_heading (table, users, line, length, fault)
                              : read_users_row (table, users, line, length, fault)))
      return false;
  }
  if (users->columns == 0)
    return users_complain (table, users, "no line names the columns", fault);
  return true;
}

/* The whole of an open file as text in ARENA, behind its byte-order mark; null if it cannot be
   read.                                                                                        */
static char *
read_file (struct arena *arena, FILE *file, char **end)
{
  static const char mark[] = "\xEF\xBB\xBF";
  struct text read;
  char block[16 * 1024];
  char *bytes = NULL;
  size_t n;

  text_init (&read);
  while ((n = fread (block, 1, sizeof block, file)) > 0)
    text_add_bytes (&read, block, n);
  if (!ferror (file)) {
    bytes = arena_copy (arena, read.bytes, read.length);
    *end = bytes + read.length;
    if (strncmp (bytes, mark, sizeof mark - 1) == 0)
      bytes += sizeof mark - 1;
  }
  text_clear (&read);
  return bytes;
}

/* True, with a null path in USERS, if there is no such file.  */
static bool
open_users (struct arena *arena, const char *path, struct users_text *users, struct fault *fault)
{
  FILE *file = fopen (path, "r");

  *users = (struct users_text) { 0 };
  if (file == NULL && errno == ENOENT)
    return true;
  if (file == NULL)
    return fault_set (fault, MESSAGE_FILE, path, strerror (errno));
  users->next = read_file (arena, file, &users->end);
  if (users->next == NULL)
    fault_set (fault, MESSAGE_FILE, path, strerror (errno));
  fclose (file);
  users->path = path;
  return users->next != NULL;
}

static size_t
count_lines (const struct users_text *users)
{
  size_t count = 1;

  for (const char *c = users->next; c != NULL && c < users->end; c++)
    if (*c == '\n')
      count++;
  return users->path != NULL ? count : 0;
}

struct table *
table_read (struct arena *arena, const char *name, const char *directory, struct fault *fault)
{
  const struct table_text *text = table_text_find (name);
  struct table *table = ARENA_NEW (arena, struct table);
  struct users_text users = { 0 };

  assert (text != NULL);
  if (directory != NULL
      && !open_users (arena, arena_format (arena, "%s/%s.tsv", directory, name), &users, fault))
    return NULL;
  table->arena = arena;
  table->name = text->name;
  table->users_file = users.path;
  if (!read_built_in (table, text, count_lines (&users), fault))
    return NULL;
  if (users.path != NULL && !read_users_rows (table, &users, fault))
    return NULL;
  return table;
}
