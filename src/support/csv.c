#include "config.h"
#include "support/csv.h"

#include <string.h>
#include "support/arena.h"
#include "support/fault.h"
#include "support/text.h"

bool
csv_complain (const struct csv *csv, int line, int column, enum message kind, const char *fact2,
              const char *fact3, struct fault *fault)
{
  const char *place = arena_format (fault->arena, "%s:%d:%d", csv->name, line, column);
  fault_set_at (fault, kind, (struct place) { line, column, column }, place, fact2);
  fault_facts (fault, fact3, NULL);
  return false;
}

/* ---- Encodings ---- */

/* The characters of the bytes 0x80 to 0x9F; 0: none.  Source: WHATWG Encoding Standard, index
   windows-1252; the five bytes without a character there are controls.                          */
static const unsigned short windows_1252[] = {
  0x20AC, 0, 0x201A, 0x0192, 0x201E, 0x2026, 0x2020, 0x2021, 0x02C6, 0x2030, 0x0160, 0x2039,
  0x0152, 0, 0x017D, 0, 0, 0x2018, 0x2019, 0x201C, 0x201D, 0x2022, 0x2013, 0x2014, 0x02DC,
  0x2122, 0x0161, 0x203A, 0x0153, 0, 0x017E, 0x0178
};

/* A character below 0x10000 and above 0x7F as UTF-8; its bytes.  */
static size_t
utf8_encode (unsigned code, char out[3])
{
  if (code < 0x800) {
    out[0] = (char) (0xC0 | (code >> 6));
    out[1] = (char) (0x80 | (code & 0x3F));
    return 2;
  }
  out[0] = (char) (0xE0 | (code >> 12));
  out[1] = (char) (0x80 | ((code >> 6) & 0x3F));
  out[2] = (char) (0x80 | (code & 0x3F));
  return 3;
}

/* Where the byte at OFFSET stands.  */
static void
place_of (const char *bytes, size_t offset, int *line, int *column)
{
  size_t start = 0;
  *line = 1;
  for (size_t i = 0; i < offset; i++)
    if (bytes[i] == '\n') {
      ++*line;
      start = i + 1;
    }
  *column = (int) (offset - start) + 1;
}

static bool
read_windows_1252 (struct csv *csv, struct arena *arena, struct fault *fault)
{
  char *out = ARENA_ARRAY (arena, 3 * csv->length + 1, char);
  size_t n = 0;
  for (size_t i = 0; i < csv->length; i++) {
    unsigned char byte = (unsigned char) csv->bytes[i];
    unsigned code = byte >= 0x80 && byte < 0xA0 ? windows_1252[byte - 0x80] : byte;
    if (code == 0) {
      int line, column;
      place_of (csv->bytes, i, &line, &column);
      return csv_complain (csv, line, column, MESSAGE_CSV_ENCODING,
                           "neither UTF-8 nor Windows-1252 text", NULL, fault);
    }
    if (code < 0x80)
      out[n++] = (char) code;
    else
      n += utf8_encode (code, out + n);
  }
  csv->bytes = out;
  csv->length = n;
  csv->encoding = CSV_WINDOWS_1252;
  return true;
}

bool
csv_open (struct csv *csv, struct arena *arena, const char *name, const char *bytes, size_t n,
          struct fault *fault)
{
  *csv = (struct csv) { .name = name, .bytes = bytes, .length = n, .line = 1, .delimiter = ',' };
  if (n >= 2 && (memcmp (bytes, "\xFF\xFE", 2) == 0 || memcmp (bytes, "\xFE\xFF", 2) == 0))
    return csv_complain (csv, 1, 1, MESSAGE_CSV_ENCODING, "UTF-16 text", NULL, fault);
  const char *null = n > 0 ? memchr (bytes, '\0', n) : NULL;
  if (null != NULL) {
    int line, column;
    size_t offset = (size_t) (null - bytes);
    place_of (bytes, offset, &line, &column);
    return csv_complain (csv, line, column, MESSAGE_CSV_ENCODING,
                         offset < 2 ? "UTF-16 text" : "no text: a null byte stands here", NULL,
                         fault);
  }
  if (n >= 3 && memcmp (bytes, "\xEF\xBB\xBF", 3) == 0) {
    csv->bytes += 3;
    csv->length -= 3;
    csv->encoding = CSV_UTF8_MARK;
  }
  if (utf8_first_bad (csv->bytes, csv->length) == csv->length)
    return true;
  if (csv->encoding == CSV_UTF8_MARK) {
    int line, column;
    place_of (csv->bytes, utf8_first_bad (csv->bytes, csv->length), &line, &column);
    return csv_complain (csv, line, column, MESSAGE_CSV_ENCODING,
                         "marked as UTF-8, which it is not here", NULL, fault);
  }
  return read_windows_1252 (csv, arena, fault);
}

/* ---- The delimiter ---- */

enum { CANDIDATES = 3, LINES_LOOKED_AT = 1000 };
static const char candidates[CANDIDATES] = { ';', '\t', ',' };

/* What the lines hold of each: least and most on a line, and commas that are no decimal sign.  */
struct counts {
  size_t least[CANDIDATES], most[CANDIDATES], lines;
  bool comma_beside_words;
};

static bool
is_digit (char c)
{
  return c >= '0' && c <= '9';
}

/* Counts on the line that begins at START, outside quotes; returns where the next one begins.  */
static size_t
count_line (const struct csv *csv, size_t start, struct counts *counts)
{
  size_t found[CANDIDATES] = { 0 }, i = start;
  bool quoted = false, blank = true;
  for (; i < csv->length && (quoted || csv->bytes[i] != '\n'); i++) {
    const char c = csv->bytes[i];
    quoted = c == '"' ? !quoted : quoted;
    blank = blank && (c == ' ' || c == '\r');
    for (size_t k = 0; k < CANDIDATES && !quoted; k++)
      found[k] += c == candidates[k];
    if (c == ',' && !quoted
        && !(i > start && is_digit (csv->bytes[i - 1]) && i + 1 < csv->length
             && is_digit (csv->bytes[i + 1])))
      counts->comma_beside_words = true;
  }
  if (blank || (csv->remarks && csv->bytes[start] == '#'))
    return i + 1;
  for (size_t k = 0; k < CANDIDATES; k++) {
    if (counts->lines == 0 || found[k] < counts->least[k])
      counts->least[k] = found[k];
    if (found[k] > counts->most[k])
      counts->most[k] = found[k];
  }
  counts->lines++;
  return i + 1;
}

bool
csv_find_delimiter (struct csv *csv, struct fault *fault)
{
  struct counts counts = { { 0 }, { 0 }, 0, false };
  size_t there = 0, last = 0, steady = 0, on_each = 0;
  for (size_t at = csv->next; at < csv->length && counts.lines < LINES_LOOKED_AT;)
    at = count_line (csv, at, &counts);
  for (size_t k = 0; k < CANDIDATES; k++) {
    there += counts.most[k] > 0;
    last = counts.most[k] > 0 ? k : last;
  }
  if (there == 0)
    return csv_complain (csv, csv->line, 1, MESSAGE_CSV_DELIMITER,
                         "no comma, semicolon or tab stands in it", NULL, fault);
  if (there > 1 && counts.most[2] > 0 && !counts.comma_beside_words) {
    there--;                              /* every comma may be a decimal one */
    last = counts.most[0] > 0 ? 0 : 1;
  }
  for (size_t k = 0; there > 1 && k < CANDIDATES; k++)
    if (counts.least[k] > 0) {
      on_each++;
      last = k;
    }
  for (size_t k = 0; there > 1 && on_each != 1 && k < CANDIDATES; k++)
    if (counts.least[k] > 0 && counts.least[k] == counts.most[k]) {
      steady++;
      last = k;
    }
  if (there > 1 && on_each != 1 && steady != 1)
    return csv_complain (csv, csv->line, 1, MESSAGE_CSV_DELIMITER,
                         counts.most[0] > 0 ? "a semicolon or a comma" : "a tab or a comma", NULL,
                         fault);
  csv->delimiter = candidates[last];
  return true;
}

/* ---- Cells ---- */

/* A row while it is read; columns are counted from byte AT of the file on.  */
struct reading {
  struct csv *csv;
  struct arena *arena;
  struct csv_cell *cells;
  size_t count, room;
  size_t at;                      /* a byte of this line ... */
  int column;                     /* ... and its column */
};

static int
column_at (struct reading *r, size_t offset)
{
  r->column += (int) utf8_characters (r->csv->bytes + r->at, offset - r->at);
  r->at = offset;
  return r->column;
}

static struct csv_cell *
cell_new (struct reading *r)
{
  if (r->count == r->room) {
    const size_t room = r->room > 0 ? 2 * r->room : 16;
    struct csv_cell *more = ARENA_ARRAY (r->arena, room, struct csv_cell);
    if (r->count > 0)
      memcpy (more, r->cells, r->count * sizeof *more);
    r->cells = more;
    r->room = room;
  }
  struct csv_cell *cell = &r->cells[r->count++];
  *cell = (struct csv_cell) { .line = r->csv->line, .column = column_at (r, r->csv->next) };
  return cell;
}

/* Does a line end at OFFSET?  Its bytes, 0 if not.  */
static size_t
line_end (const struct csv *csv, size_t offset)
{
  if (csv->bytes[offset] == '\n')
    return 1;
  return csv->bytes[offset] == '\r' && offset + 1 < csv->length && csv->bytes[offset + 1] == '\n'
           ? 2 : 0;
}

/* A copy without the doubling of quote marks.  */
static const char *
undoubled (struct arena *arena, const char *bytes, size_t n, uint32_t *length)
{
  char *out = ARENA_ARRAY (arena, n + 1, char);
  size_t k = 0;
  for (size_t i = 0; i < n; i++) {
    out[k++] = bytes[i];
    i += bytes[i] == '"';
  }
  *length = (uint32_t) k;
  return out;
}

/* The cell opens with a quote mark, which is next.  */
static bool
read_quoted (struct reading *r, struct csv_cell *cell, struct fault *fault)
{
  struct csv *csv = r->csv;
  const size_t start = csv->next + 1;
  size_t i = start;
  bool doubled = false;
  for (;; i++) {
    if (i >= csv->length)
      return csv_complain (csv, cell->line, cell->column, MESSAGE_CSV_QUOTE,
                           "this text is never closed", NULL, fault);
    if (csv->bytes[i] == '\n') {
      csv->line++;
      r->at = i + 1;
      r->column = 1;
    }
    if (csv->bytes[i] != '"')
      continue;
    if (i + 1 >= csv->length || csv->bytes[i + 1] != '"')
      break;
    doubled = true;
    i++;
  }
  cell->quoted = true;
  cell->text = csv->bytes + start;
  cell->length = (uint32_t) (i - start);
  if (doubled)
    cell->text = undoubled (r->arena, csv->bytes + start, i - start, &cell->length);
  csv->next = i + 1;
  while (csv->next < csv->length && csv->bytes[csv->next] == ' ' && csv->delimiter != ' ')
    csv->next++;
  if (csv->next < csv->length && csv->bytes[csv->next] != csv->delimiter
      && line_end (csv, csv->next) == 0)
    return csv_complain (csv, csv->line, column_at (r, csv->next), MESSAGE_CSV_QUOTE,
                         "this stands behind the closing quote mark", NULL, fault);
  return true;
}

static bool
read_plain (struct reading *r, struct csv_cell *cell, struct fault *fault)
{
  struct csv *csv = r->csv;
  const size_t start = csv->next;
  size_t i = start;
  for (; i < csv->length && csv->bytes[i] != csv->delimiter && line_end (csv, i) == 0; i++)
    if (csv->bytes[i] == '"' || csv->bytes[i] == '\r')
      return csv_complain (csv, csv->line, column_at (r, i), MESSAGE_CSV_QUOTE,
                           csv->bytes[i] == '"' ? "a quote mark inside a cell that does not open "
                                                  "with one" : "a carriage return inside a line",
                           NULL, fault);
  cell->text = csv->bytes + start;
  cell->length = (uint32_t) (i - start);
  csv->next = i;
  return true;
}

static void
pass_remarks (struct csv *csv)
{
  while (csv->remarks && csv->next < csv->length && csv->bytes[csv->next] == '#') {
    const char *start = csv->bytes + csv->next;
    const char *end = memchr (start, '\n', csv->length - csv->next);
    csv->next = end != NULL ? (size_t) (end - csv->bytes) + 1 : csv->length;
    csv->line++;
    csv->remarks_passed++;
  }
}

bool
csv_next (struct csv *csv, struct arena *arena, struct csv_row *row, struct fault *fault)
{
  pass_remarks (csv);
  if (csv->next >= csv->length)
    return false;
  struct reading r = { .csv = csv, .arena = arena, .at = csv->next, .column = 1 };
  const int line = csv->line;
  for (;;) {
    struct csv_cell *cell = cell_new (&r);
    const bool quoted = csv->next < csv->length && csv->bytes[csv->next] == '"';
    if (!(quoted ? read_quoted (&r, cell, fault) : read_plain (&r, cell, fault)))
      return false;
    if (csv->next >= csv->length || csv->bytes[csv->next] != csv->delimiter)
      break;
    csv->next++;
  }
  csv->next += csv->next < csv->length ? line_end (csv, csv->next) : 0;
  csv->line++;
  *row = (struct csv_row) { r.cells, r.count, line };
  return true;
}
