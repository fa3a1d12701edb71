/* A component of a sample in each row, as instruments export them: a column of samples, one of
   components, one of figures.  It is turned into a row for each sample, whose cells stay where they
   were in the file; then it is read like any other.                                             */
#include "config.h"
#include "gas/laboratory_private.h"

#include <string.h>
#include "gas/species.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"

/* Where things stand, or NOWHERE.  */
struct long_table {
  size_t sample, apart, figures, spread, unit, basis;
  struct heading figure, uncertainty;
  bool parted;                    /* a date or a run tells apart what one sample's name does not */
};

/* What a row has: numbers of its sample and component.  */
struct long_row { size_t row, sample, component; };

struct long_reading {
  struct laboratory *lab;
  struct arena *arena;
  struct long_table t;
  struct map *samples, *components, *names;      /* to axes; names as written to components too */
  struct long_row *rows;
  size_t count;
  struct slice unit_read;                        /* the last one, and what it was */
  struct heading unit;
};

/* More than this no memory should hold; a year of samples, one a minute, has five million.  */
enum { CELLS_MOST = 8000000 };

/* ---- Which columns ---- */

/* Has the column several values, below the headings?  */
static bool
column_varies (const struct laboratory *lab, size_t column, size_t first)
{
  struct slice own = { NULL, 0 };
  for (size_t r = first; r < lab->row_count; r++) {
    struct slice s = cell_slice (lab, r, column);
    if (s.n == 0)
      continue;
    if (own.n == 0)
      own = s;
    else if (s.n != own.n || memcmp (s.at, own.at, s.n) != 0)
      return true;
  }
  return false;
}

/* Does the first component stand in a later row again?  */
static bool
names_repeat (const struct laboratory *lab, size_t first)
{
  struct slice own = cell_slice (lab, first, lab->names);
  for (size_t r = first + 1; r < lab->row_count; r++) {
    struct slice s = cell_slice (lab, r, lab->names);
    if (s.n == own.n && memcmp (s.at, own.at, s.n) == 0)
      return true;
  }
  return false;
}

bool
layout_is_long (const struct laboratory *lab, struct arena *arena, size_t first)
{
  bool dates = false;
  for (size_t k = 0; k < lab->rows[lab->heading].count; k++) {
    struct heading h = heading_read (arena, lab->words, cell_slice (lab, lab->heading, k));
    if (k == lab->names || (h.kind != HEADING_SAMPLE && h.kind != HEADING_DATE))
      continue;
    if (h.kind == HEADING_SAMPLE && column_varies (lab, k, first))
      return true;
    dates = dates || (h.kind == HEADING_DATE && column_varies (lab, k, first));
  }
  return dates && names_repeat (lab, first);
}

/* A column of dry and wet, and not one of units.  */
static bool
is_basis (const struct long_reading *r, size_t column, size_t first)
{
  const struct laboratory *lab = r->lab;
  for (size_t i = first; i < lab->row_count; i++) {
    struct slice s = cell_slice (lab, i, column);
    struct heading h = heading_read (r->arena, lab->words, s);
    if (s.n > 0)
      return h.moisture != LABORATORY_UNSAID && h.unit == NULL && !h.percent;
  }
  return false;
}

/* A second column of figures: the unit that is asked for decides, or nothing does.  */
static bool
choose_figures (struct long_reading *r, size_t column, const struct heading *h,
                struct fault *fault)
{
  struct laboratory *lab = r->lab;
  struct long_table *t = &r->t;
  const struct unit *asked = lab->asked->unit;
  const char *passed = slice_text (r->arena, cell_slice (lab, lab->heading, column));
  if (t->figures != NOWHERE && asked != NULL && h->unit == asked && t->figure.unit != asked)
    passed = slice_text (r->arena, cell_slice (lab, lab->heading, t->figures));
  else if (t->figures != NOWHERE && (asked == NULL || t->figure.unit != asked))
    return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_UNIT,
                        arena_format (fault->arena, "there are two columns of figures, '%s' and "
                                      "'%s'", slice_text (fault->arena,
                                                          cell_slice (lab, lab->heading,
                                                                      t->figures)), passed),
                        "say which by its unit behind the file's name, or take one out", fault);
  else if (t->figures != NOWHERE) {
    pass_over (lab, r->arena, arena_format (r->arena, "column '%s'", passed));
    return true;
  }
  if (t->figures != NOWHERE)
    pass_over (lab, r->arena, arena_format (r->arena, "column '%s'", passed));
  t->figures = column;
  t->figure = *h;
  return true;
}

static bool
take_column (struct long_reading *r, size_t column, size_t first, struct fault *fault)
{
  struct laboratory *lab = r->lab;
  struct long_table *t = &r->t;
  struct slice text = cell_slice (lab, lab->heading, column);
  struct heading h = heading_read (r->arena, lab->words, text);
  if (h.kind == HEADING_UNIT && h.unit == NULL) {
    size_t *where = is_basis (r, column, first) ? &t->basis : &t->unit;
    if (*where == NOWHERE) {
      *where = column;
      return true;
    }
  }
  if (h.kind == HEADING_SAMPLE && t->sample == NOWHERE) {
    t->sample = column;
    return true;
  }
  if ((h.kind == HEADING_DATE || h.kind == HEADING_SAMPLE) && t->apart == NOWHERE) {
    t->apart = column;
    return true;
  }
  if (h.kind == HEADING_SPREAD) {
    if (t->spread != NOWHERE)
      return complain_at (lab, lab->heading, column, MESSAGE_LABORATORY_TWICE, "the uncertainty",
                          NULL, fault);
    t->spread = column;
    t->uncertainty = h;
    return true;
  }
  layout_add_unit_row (lab, r->arena, column, &h);
  if (h.kind == HEADING_AMOUNT)
    return choose_figures (r, column, &h, fault);
  if (text.n > 0)
    pass_over (lab, r->arena, arena_format (r->arena, "column '%s'",
                                            slice_text (r->arena, text)));
  return true;
}

static bool
find_columns (struct long_reading *r, size_t first, struct fault *fault)
{
  struct laboratory *lab = r->lab;
  for (size_t k = 0; k < lab->rows[lab->heading].count; k++)
    if (k != lab->names && !take_column (r, k, first, fault))
      return false;
  if (r->t.sample == NOWHERE) {
    r->t.sample = r->t.apart;
    r->t.apart = NOWHERE;
  }
  if (r->t.figures == NOWHERE)
    return complain_at (lab, lab->heading, lab->names, MESSAGE_LABORATORY_LAYOUT,
                        "no column is headed as one of figures",
                        "head it value, result, or by its unit", fault);
  return layout_moisture (lab, r->t.figure.moisture, lab->heading, r->t.figures, fault);
}

/* ---- Which rows ---- */

static struct axis *
axis_of (struct map *map, const char *key)
{
  return map_find (map, key, strlen (key));
}

/* The sample of a row, a new one if need be; null: it names none.  */
static struct axis *
sample_of (struct long_reading *r, size_t row)
{
  struct laboratory *lab = r->lab;
  struct slice name = cell_slice (lab, row, r->t.sample);
  if (name.n == 0)
    return NULL;
  const char *text = slice_text (r->arena, name);
  if (r->t.parted)
    text = arena_format (r->arena, "%s, %s", text,
                         slice_text (r->arena, cell_slice (lab, row, r->t.apart)));
  struct axis *s = axis_of (r->samples, text);
  if (s != NULL)
    return s;
  const struct csv_cell *cell = cell_at (lab, row, r->t.sample);
  s = &lab->samples[lab->sample_count++];
  *s = (struct axis) { .name = text, .index = lab->sample_count - 1, .spread = NOWHERE,
                       .line = cell->line, .column = cell->column };
  map_put (r->samples, text, strlen (text), s);
  return s;
}

/* The component a name stands for, however it is written: methane is CH4.  */
static struct axis *
component_of (struct long_reading *r, size_t row, const struct heading *h)
{
  struct laboratory *lab = r->lab;
  const struct species *species = NULL;
  const char *candidates, *text = slice_text (r->arena, h->name);
  enum species_match match = species_find (lab->words->species, h->name.at, h->name.n, &species,
                                           &candidates);
  const char *key = match == SPECIES_KEY || match == SPECIES_SYNONYM ? species->key : text;
  struct axis *c = axis_of (r->components, key);
  if (c == NULL) {
    c = &lab->components[lab->component_count++];
    *c = layout_axis (lab, r->arena, row, lab->names, h);
    c->index = lab->component_count - 1;
    map_put (r->components, key, strlen (key), c);
  }
  return c;
}

/* What a row's unit cell says.  */
static bool
read_unit (struct long_reading *r, size_t row, struct fault *fault)
{
  struct laboratory *lab = r->lab;
  struct slice s = cell_slice (lab, row, r->t.unit);
  if (r->t.unit == NOWHERE)
    return true;
  if (s.n != r->unit_read.n || memcmp (s.at, r->unit_read.at, s.n) != 0) {
    r->unit_read = s;
    r->unit = heading_read (r->arena, lab->words, s);
  }
  const struct heading *u = &r->unit;
  if (s.n > 0 && (u->kind != HEADING_AMOUNT || (u->unit == NULL && !u->percent)))
    return complain_at (lab, row, r->t.unit, MESSAGE_LABORATORY_UNIT,
                        arena_format (fault->arena, "no unit of an amount is called '%s'",
                                      slice_text (fault->arena, s)),
                        "mol%, mass%, vol%, ppm, mg/Nm3 ...", fault);
  return layout_moisture (lab, u->moisture, row, r->t.unit, fault);
}

static bool
read_basis (struct long_reading *r, size_t row, struct fault *fault)
{
  struct slice s = cell_slice (r->lab, row, r->t.basis);
  if (r->t.basis == NOWHERE || s.n == 0)
    return true;
  struct heading h = heading_read (r->arena, r->lab->words, s);
  if (h.moisture == LABORATORY_UNSAID)
    return complain_at (r->lab, row, r->t.basis, MESSAGE_LABORATORY_MOISTURE,
                        arena_format (fault->arena, "'%s' says neither",
                                      slice_text (fault->arena, s)), "dry, or wet", fault);
  return layout_moisture (r->lab, h.moisture, row, r->t.basis, fault);
}

/* A row without a component: a total, the headings once more, a remark.  */
static bool
no_component (struct long_reading *r, size_t row, enum heading_kind kind, struct fault *fault)
{
  struct laboratory *lab = r->lab;
  struct slice text = cell_slice (lab, row, lab->names);
  bool figures = amount_looks (cell_slice (lab, row, r->t.figures));
  if (figures && kind == HEADING_EMPTY)
    return complain_at (lab, row, lab->names, MESSAGE_LABORATORY_NAME,
                        "this figure has no component", "name it, or take the row out", fault);
  if (figures && (kind == HEADING_UNKNOWN || kind == HEADING_AMOUNT || kind == HEADING_SPREAD))
    return layout_name_refused (lab, row, lab->names, text, fault);
  pass_over (lab, r->arena, arena_format (r->arena, "line %d%s%s%s", lab->rows[row].line,
                                          text.n > 0 ? " (" : "", slice_text (r->arena, text),
                                          text.n > 0 ? ")" : ""));
  return true;
}

static bool
row_is_wide (const struct long_reading *r, size_t row, struct fault *fault)
{
  const struct laboratory *lab = r->lab;
  const size_t width = lab->rows[lab->heading].count;
  for (size_t k = width; k < lab->rows[row].count; k++)
    if (cell_slice (lab, row, k).n > 0) {
      complain_at (lab, row, k, MESSAGE_CSV_WIDTH,
                   arena_format (fault->arena, "this row has %zu cells, the headings are %zu",
                                 lab->rows[row].count, width), NULL, fault);
      return true;
    }
  return false;
}

static bool
read_row (struct long_reading *r, size_t row, struct fault *fault)
{
  struct laboratory *lab = r->lab;
  struct slice text = cell_slice (lab, row, lab->names);
  struct axis *c = text.n > 0 ? map_find (r->names, text.at, text.n) : NULL;
  if (row_is_wide (r, row, fault))
    return false;
  if (c == NULL) {
    struct heading h = heading_read (r->arena, lab->words, text);
    if (h.kind != HEADING_PART)
      return no_component (r, row, h.kind, fault);
    if (!layout_name_holds (lab, row, lab->names, h.name, fault)
        || !layout_moisture (lab, h.moisture, row, lab->names, fault))
      return false;
    c = component_of (r, row, &h);
    map_put (r->names, text.at, text.n, c);
  }
  struct axis *s = sample_of (r, row);
  if (s == NULL)
    return complain_at (lab, row, r->t.sample, MESSAGE_LABORATORY_SAMPLE, "this row names none",
                        "write the sample's name in each of its rows", fault);
  if (!read_unit (r, row, fault) || !read_basis (r, row, fault))
    return false;
  if (c->unit == NULL && !c->percent) {
    const struct heading *u = r->t.unit != NOWHERE && r->unit_read.n > 0 ? &r->unit : &r->t.figure;
    c->unit = u->unit;
    c->unit_text = u->unit_text;
    c->percent = u->percent;
  }
  r->rows[r->count++] = (struct long_row) { row, s->index, c->index };
  return true;
}

/* ---- A row for each sample ---- */

/* A figure that has another unit than the rest of its component's: the unit goes into its cell, in
   front of an uncertainty.                                                                      */
static struct csv_cell
with_unit (struct arena *arena, const struct csv_cell *cell, const char *unit)
{
  struct csv_cell made = *cell;
  const char *text = arena_copy (arena, cell->text, cell->length);
  const char *sign = strstr (text, "\xC2\xB1");
  sign = sign != NULL ? sign : strstr (text, "+/-");
  size_t n = sign != NULL ? (size_t) (sign - text) : cell->length;
  made.text = arena_format (arena, "%.*s %s %s", (int) n, text, unit, text + n);
  made.length = (uint32_t) strlen (made.text);
  return made;
}

static struct csv_cell
figure_cell (struct long_reading *r, const struct long_row *at, struct fault *fault)
{
  const struct laboratory *lab = r->lab;
  const struct csv_cell *cell = cell_at (lab, at->row, r->t.figures);
  const struct axis *c = &lab->components[at->component];
  struct slice s = cell_slice (lab, at->row, r->t.figures);
  (void) read_unit (r, at->row, fault);          /* it was read well before */
  if (r->t.unit == NOWHERE || r->unit_read.n == 0 || !amount_looks (s)
      || (r->unit.unit == c->unit && r->unit.percent == c->percent))
    return *cell;
  return with_unit (r->arena, cell, r->unit.unit != NULL ? r->unit.unit_text : "%");
}

/* A component that stands twice in one sample.  */
static bool
twice (const struct long_reading *r, const struct long_row *at, const struct csv_cell *before,
       struct fault *fault)
{
  const struct laboratory *lab = r->lab;
  return complain_at (lab, at->row, lab->names, MESSAGE_LABORATORY_TWICE,
                      arena_format (fault->arena, "%s of %s", lab->components[at->component].name,
                                    lab->samples[at->sample].name),
                      arena_format (fault->arena, "its figure stands at %s:%d:%d already",
                                    lab->csv.name, before->line, before->column), fault);
}

static bool
too_many (const struct laboratory *lab, struct fault *fault)
{
  return complain_at (lab, lab->heading, lab->names, MESSAGE_LABORATORY_LAYOUT,
                      arena_format (fault->arena, "%zu samples of %zu components are too many",
                                    lab->sample_count, lab->component_count),
                      "part the file", fault);
}

/* FALSE with *AGAIN, and no fault: a date or a run is to tell samples apart.  */
static bool
make_rows (struct long_reading *r, bool *again, struct fault *fault)
{
  struct laboratory *lab = r->lab;
  const size_t width = 2 * lab->component_count, n = lab->sample_count;
  if (width > 0 && n > CELLS_MOST / width)
    return too_many (lab, fault);
  struct csv_row *rows = ARENA_ARRAY (r->arena, n + 1, struct csv_row);
  struct csv_cell **of = ARENA_ARRAY (r->arena, n, struct csv_cell *);
  rows[0] = lab->rows[lab->heading];
  for (size_t s = 0; s < n; s++) {
    struct csv_cell *cells = ARENA_ARRAY (r->arena, width, struct csv_cell);
    for (size_t k = 0; k < width; k++)
      cells[k] = (struct csv_cell) { .text = "", .line = lab->samples[s].line,
                                     .column = lab->samples[s].column };
    of[s] = cells;
    rows[s + 1] = (struct csv_row) { .cells = cells, .count = width,
                                     .line = lab->samples[s].line };
  }
  bool *filled = ARENA_ARRAY (r->arena, n * lab->component_count, bool);
  for (size_t i = 0; i < r->count; i++) {
    const struct long_row *at = &r->rows[i];
    struct csv_cell *cell = &of[at->sample][2 * at->component];
    bool *full = &filled[at->sample * lab->component_count + at->component];
    *again = *full && r->t.apart != NOWHERE && !r->t.parted;
    if (*full)
      return *again ? false : twice (r, at, cell, fault);
    *full = true;
    *cell = figure_cell (r, at, fault);
    if (r->t.spread != NOWHERE && r->t.spread < lab->rows[at->row].count)
      cell[1] = *cell_at (lab, at->row, r->t.spread);
  }
  lab->rows = rows;
  lab->row_count = n + 1;
  lab->heading = 0;
  return true;
}

static void
settle_axes (struct long_reading *r)
{
  struct laboratory *lab = r->lab;
  for (size_t s = 0; s < lab->sample_count; s++)
    lab->samples[s].index = s + 1;
  for (size_t c = 0; c < lab->component_count; c++) {
    struct axis *axis = &lab->components[c];
    axis->index = 2 * c;
    if (r->t.spread != NOWHERE)
      layout_take_spread (axis, 2 * c + 1, &r->t.uncertainty);
  }
  lab->by_rows = false;
  lab->in_long = true;
}

static bool
read_all (struct long_reading *r, size_t first, bool *again, struct fault *fault)
{
  struct laboratory *lab = r->lab;
  const char *passed = lab->passed;
  *again = false;
  lab->sample_count = lab->component_count = r->count = 0;
  r->samples = map_create ();
  r->components = map_create ();
  r->names = map_create ();
  bool done = true;
  for (size_t row = first; done && row < lab->row_count; row++)
    done = read_row (r, row, fault);
  done = done && make_rows (r, again, fault);
  map_destroy (r->samples);
  map_destroy (r->components);
  map_destroy (r->names);
  lab->passed = *again ? passed : lab->passed;
  return done;
}

bool
layout_long (struct laboratory *lab, struct arena *arena, size_t first, struct fault *fault)
{
  struct long_reading r = {
    .lab = lab, .arena = arena, .unit_read = { "", 0 },
    .t = { .sample = NOWHERE, .apart = NOWHERE, .figures = NOWHERE, .spread = NOWHERE,
           .unit = NOWHERE, .basis = NOWHERE }
  };
  bool again;
  if (!find_columns (&r, first, fault))
    return false;
  const char *apart = slice_text (arena, cell_slice (lab, lab->heading, r.t.apart));
  r.rows = ARENA_ARRAY (arena, lab->row_count, struct long_row);
  bool done = read_all (&r, first, &again, fault);
  if (!done && again) {
    r.t.parted = true;
    done = read_all (&r, first, &again, fault);
  }
  if (!done)
    return false;
  if (r.t.apart != NOWHERE && !r.t.parted)
    pass_over (lab, arena, arena_format (arena, "column '%s'", apart));
  settle_axes (&r);
  return true;
}
