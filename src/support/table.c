#include "config.h"
#include "support/table.h"

#include <assert.h>
#include <errno.h>
#include <math.h>
#include <stdint.h>
#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/infile.h"
#include "support/number.h"
#include "support/text.h"

/* Where the last cell asked for stands, so that the next one of its row is near.  */
struct cursor { size_t row, place; const char *at; };

/* A row is its cells as strings one behind the other; nothing of the built-in ones is copied.
   Columns are named by the built-in table.  A user's file may bring them in another order and leave
   some out: those cells are empty.                                                              */
struct table {
  struct arena *arena;
  const struct table_text *text;
  const char **names;                     /* of the columns */
  size_t built_in_rows;
  size_t users_rows;
  const char *users_file;                 /* its path; null: there is none */
  const char **users_cells;               /* by user's row: its first cell */
  int *users_lines;
  size_t *users_place;                    /* by column: which cell of a user's row; or ABSENT */
  struct cursor *cursor;
};

#define ABSENT SIZE_MAX

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
  return table->built_in_rows + table->users_rows;
}

int
table_column (const struct table *table, const char *name)
{
  for (size_t i = 0; i < table->text->columns; i++)
    if (strcmp (table->names[i], name) == 0)
      return (int) i;
  return -1;
}

bool
table_row_is_users (const struct table *table, size_t row)
{
  return row >= table->built_in_rows;
}

static const char *
first_cell (const struct table *table, size_t row)
{
  return table_row_is_users (table, row) ? table->users_cells[row - table->built_in_rows]
                                         : table->text->rows[row + 1];
}

/* The cell N cells behind the one at AT.  */
static const char *
walk (const char *at, size_t n)
{
  for (; n > 0; n--)
    at += strlen (at) + 1;
  return at;
}

const char *
table_cell (const struct table *table, size_t row, int column)
{
  struct cursor *cursor = table->cursor;
  size_t place;

  assert (row < table_rows (table) && column < (int) table->text->columns);
  if (column < 0)
    return "";
  place = table_row_is_users (table, row) ? table->users_place[column] : (size_t) column;
  if (place == ABSENT)
    return "";
  if (cursor->at == NULL || cursor->row != row || cursor->place > place)
    *cursor = (struct cursor) { row, 0, first_cell (table, row) };
  cursor->at = walk (cursor->at, place - cursor->place);
  cursor->place = place;
  return cursor->at;
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
  return complain (arena_format (table->arena, "%s.tsv", table->text->name),
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

/* A user's file while it is read.  */
struct users_text {
  const char *path;                       /* null: there is no file */
  char *next, *end;                       /* what is left of it, in the table's arena */
  int line;
  size_t columns;                         /* of its heading; 0 before that was read */
};

static bool
users_complain (const struct table *table, const struct users_text *users, const char *what,
                struct fault *fault)
{
  return complain (users->path, arena_format (table->arena, "%d", users->line), what, fault);
}

/* Cuts LINE into strings at its tabs; returns how many, and in *LAST the last one.  */
static size_t
cut (char *line, size_t length, const char **last)
{
  char *end = line + length;
  size_t count = 1;
  char *tab;

  while ((tab = memchr (line, '\t', (size_t) (end - line))) != NULL) {
    *tab = '\0';
    line = tab + 1;
    count++;
  }
  *last = line;
  return count;
}

static bool
read_heading (struct table *table, struct users_text *users, char *line, size_t length,
              struct fault *fault)
{
  const char *name = line, *last;
  size_t columns = table->text->columns;

  users->columns = cut (line, length, &last);
  for (size_t i = 0; i < columns; i++)
    table->users_place[i] = ABSENT;
  for (size_t i = 0; i < users->columns; i++, name = walk (name, 1)) {
    int column = table_column (table, name);

    if (column < 0 || table->users_place[column] != ABSENT)
      return users_complain (table, users,
                             arena_format (table->arena, "the table %s has %s '%s'",
                                           table->text->name,
                                           column < 0 ? "no column" : "two columns", name), fault);
    table->users_place[column] = i;
  }
  if (table->users_place[0] != 0)
    return users_complain (table, users,
                           arena_format (table->arena, "the first column is not '%s'",
                                         table->names[0]), fault);
  if (table->users_place[columns - 1] != users->columns - 1)
    return users_complain (table, users, "the last column is not 'source'", fault);
  return true;
}

static bool
read_users_row (struct table *table, struct users_text *users, char *line, size_t length,
                struct fault *fault)
{
  const char *source;
  size_t count = cut (line, length, &source);

  if (count != users->columns)
    return users_complain (table, users,
                           arena_format (table->arena, "%zu cells where the heading has %zu", count,
                                         users->columns), fault);
  if (line[0] == '\0')
    return users_complain (table, users, "no key in the first column", fault);
  if (source[strspn (source, " ")] == '\0')
    return users_complain (table, users, "no source", fault);
  table->users_cells[table->users_rows] = line;
  table->users_lines[table->users_rows] = users->line;
  table->users_rows++;
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

/* True, with a null path in USERS, if there is no such file.  */
static bool
open_users (struct arena *arena, const char *path, struct users_text *users, struct fault *fault)
{
  static const char mark[] = "\xEF\xBB\xBF";
  struct text read;

  *users = (struct users_text) { 0 };
  text_init (&read);
  const bool good = infile_read (&(struct infile) { .name = path, .most = SIZE_MAX }, &read);
  const int reason = errno;
  if (good) {
    users->path = path;
    users->next = arena_copy (arena, read.length > 0 ? read.bytes : "", read.length);
    users->end = users->next + read.length;
    if (strncmp (users->next, mark, sizeof mark - 1) == 0)
      users->next += sizeof mark - 1;
  }
  text_clear (&read);
  return good || reason == ENOENT || fault_set (fault, MESSAGE_FILE, path, strerror (reason));
}

static size_t
count_lines (const struct users_text *users)
{
  size_t count = 1;

  for (const char *c = users->next; c < users->end; c++)
    if (*c == '\n')
      count++;
  return count;
}

/* The rows of a user's file, if there is one, behind the built-in ones.  */
static bool
add_users_rows (struct table *table, const char *directory, struct fault *fault)
{
  struct users_text users;
  const char *path = arena_format (table->arena, "%s/%s.tsv", directory, table->text->name);
  size_t most;

  if (!open_users (table->arena, path, &users, fault))
    return false;
  if (users.path == NULL)
    return true;
  most = count_lines (&users);
  table->users_file = path;
  table->users_cells = ARENA_ARRAY (table->arena, most, const char *);
  table->users_lines = ARENA_ARRAY (table->arena, most, int);
  table->users_place = ARENA_ARRAY (table->arena, table->text->columns, size_t);
  return read_users_rows (table, &users, fault);
}

struct table *
table_read (struct arena *arena, const char *name, const char *directory, struct fault *fault)
{
  struct table *table = ARENA_NEW (arena, struct table);

  table->arena = arena;
  table->text = table_text_find (name);
  assert (table->text != NULL);
  table->cursor = ARENA_NEW (arena, struct cursor);
  table->names = ARENA_ARRAY (arena, table->text->columns, const char *);
  for (size_t i = 0; i < table->text->columns; i++)
    table->names[i] = walk (table->text->rows[0], i);
  while (table->text->rows[table->built_in_rows + 1] != NULL)
    table->built_in_rows++;
  if (directory != NULL && !add_users_rows (table, directory, fault))
    return NULL;
  return table;
}
