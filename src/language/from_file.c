#include "config.h"
#include "language/session_private.h"

#include <errno.h>
#include <string.h>
#include <sys/stat.h>
#include "gas/air.h"
#include "gas/laboratory.h"
#include "gas/species.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/csv.h"
#include "support/fault.h"
#include "support/infile.h"
#include "support/text.h"

/* What is kept of a file once its analyses were read.  */
struct file_read {
  const char *path;
  struct remark *remarks;
  long long size, seconds, nanoseconds;    /* as the file was; size -1: not known */
};

/* ---- The file ---- */

/* Bytes of a file: what is read within seconds.  */
enum { FILE_MOST = 16 * 1000 * 1000 };

const char *
file_reason (int error)
{
  return error == EFBIG ? "it is larger than 16 MB; divide it" : strerror (error);
}

bool
file_bytes (const char *path, struct text *text)
{
  return infile_read (&(struct infile) { .name = path, .most = FILE_MOST }, text);
}

static void
look_at (struct file_read *file)
{
  struct stat found;
  file->size = -1;
  if (stat (file->path, &found) == 0) {
    file->size = (long long) found.st_size;
    file->seconds = (long long) found.st_mtim.tv_sec;
    file->nanoseconds = (long long) found.st_mtim.tv_nsec;
  }
}

static bool
is_gas_of (const void *with, const char *name, size_t n)
{
  const struct definition *d = name_find (with, name, n);
  return d && d->kind == NAME_GAS;
}

/* The place of the complaint is in the file; that of the fault is where the statement names it.  */
static void
place_in_statement (struct fault *fault, const struct statement *s)
{
  fault->at = s->text_at;
}

/* The analyses in the file a statement names, in ARENA.  Kinds: file, laboratory-...  */
static const struct laboratory *
file_analyses (struct session *session, struct arena *arena, const struct statement *s,
               struct fault *fault)
{
  const struct node *typed = s->from_file;
  struct laboratory_asked *asked = ARENA_NEW (arena, struct laboratory_asked);
  struct laboratory_words *words = ARENA_NEW (arena, struct laboratory_words);
  struct text text;
  if (!*s->text) {
    fault_set_at (fault, MESSAGE_TEXT_EXPECTED, s->text_at, "a file has a name", NULL);
    return NULL;
  }
  *asked = (struct laboratory_asked) {
    .file = s->text, .unit = typed->unit, .unit_text = typed->unit_text,
    .decimal = typed->figure ? *typed->figure : '\0',
    .moisture = typed->words & WORD_DRY ? LABORATORY_DRY
                : typed->words & WORD_WET ? LABORATORY_WET : LABORATORY_UNSAID
  };
  *words = (struct laboratory_words) { session->vocabulary.units, session->vocabulary.species,
                                       is_gas_of, session };
  text_init (&text);
  if (!file_bytes (s->text, &text)) {
    fault_set_at (fault, MESSAGE_FILE, s->text_at, s->text, file_reason (errno));
    text_clear (&text);
    return NULL;
  }
  /* Cells are borrowed from the bytes.  */
  const char *bytes = arena_copy (arena, text.length ? text.bytes : "", text.length);
  const size_t n = text.length;
  text_clear (&text);
  const struct laboratory *lab = laboratory_read (arena, bytes, n, asked, words, fault);
  if (!lab) {
    place_in_statement (fault, s);
  }
  return lab;
}

/* ---- A sample as a list ---- */

static const struct spread *
spread_node (struct arena *arena, const struct statement *s, const struct laboratory_part *part)
{
  if (part->spread == LABORATORY_NO_SPREAD) {
    return NULL;
  }
  struct spread *spread = ARENA_NEW (arena, struct spread);
  *spread = (struct spread) {
    .value = part->spread_number, .unit = part->spread_unit, .relative = part->spread_relative,
    .kind = part->spread == LABORATORY_EXPANDED ? SPREAD_EXPANDED : SPREAD_STANDARD,
    .k = part->k, .figure = arena_string (arena, part->spread_figure), .at = s->text_at
  };
  return spread;
}

static struct node *
part_node (struct arena *arena, const struct statement *s, const struct laboratory_part *part,
           const struct unit *basis)
{
  struct node *node = ARENA_NEW (arena, struct node), *amount = ARENA_NEW (arena, struct node);
  bool figure = part->amount == LABORATORY_FIGURE || part->amount == LABORATORY_BELOW;
  bool own_unit = figure && (part->unit != basis || part->spread_unit);
  *amount = (struct node) {
    .kind = NODE_QUANTITY, .at = s->text_at, .number = part->number, .unit_at = s->text_at,
    .figure = part->amount == LABORATORY_NOT_DETECTED ? "ND"
              : part->amount == LABORATORY_TRACE ? "trace" : arena_string (arena, part->figure),
    .unit = own_unit ? part->unit : NULL,
    .unit_text = own_unit ? arena_string (arena, part->unit_text) : NULL,
    .spread = spread_node (arena, s, part)
  };
  *node = (struct node) {
    .kind = NODE_PART, .at = s->text_at, .text = arena_string (arena, part->name), .a = amount,
    .below = part->amount == LABORATORY_BELOW, .rest = part->amount == LABORATORY_REST
  };
  if (node->rest) {
    node->a = NULL;
  }
  return node;
}

/* The unit most parts have.  */
static const struct unit *
usual_unit (const struct laboratory_parts *parts)
{
  const struct unit *best = NULL;
  size_t most = 0;
  for (size_t i = 0; i < parts->count; i++) {
    size_t same = 0;
    for (size_t k = 0; parts->at[i].unit && k < parts->count; k++) {
      same += parts->at[k].unit == parts->at[i].unit;
    }
    if (same > most) {
      most = same;
      best = parts->at[i].unit;
    }
  }
  return best;
}

static void
add_remark (struct arena *arena, struct remark **remarks, enum message kind, const char *fact1,
            const char *fact2)
{
  while (*remarks) {
    remarks = &(*remarks)->next;
  }
  *remarks = ARENA_NEW (arena, struct remark);
  **remarks = (struct remark) { .kind = kind, .fact = { fact1, fact2 }, .effect = UNSTATED };
}

/* Water in a gas that is said to be dry: dropped where its figure is zero, else a question.  */
static bool
dry_holds (struct session *session, const struct statement *s, const struct laboratory_part *part,
           bool dry, bool *drop, struct fault *fault)
{
  const struct species *species = NULL;
  const char *candidates;
  *drop = false;
  if (!dry) {
    return true;
  }
  (void) species_find (session->vocabulary.species, part->name, strlen (part->name), &species,
                       &candidates);
  if (species != session->water) {
    return true;
  }
  *drop = !(part->number > 0) && part->amount != LABORATORY_REST;
  if (*drop) {
    return true;
  }
  fault_set_at (fault, MESSAGE_LABORATORY_MOISTURE, s->text_at,
                arena_format (fault->arena, "%s:%d:%d", s->text, part->line, part->column),
                "H2O has a figure, and the gas is said to be dry");
  fault_facts (fault, "say wet, or leave the figure of H2O out of the file", NULL);
  return false;
}

/* A lump of the file, such as C6+, is a gas that was defined, or a peak that is known.  */
static bool
lump_holds (struct session *session, const struct statement *s, const struct laboratory_part *part,
            struct fault *fault)
{
  const struct species *found;
  const char *candidates;
  struct part peak[AIR_PEAK_PARTS];
  const size_t n = strlen (part->name);
  if (!strchr (part->name, '+') || is_gas_of (session, part->name, n)
      || species_find (session->vocabulary.species, part->name, n, &found, &candidates)
           != SPECIES_AMBIGUOUS
      || air_peak (session->vocabulary.species, part->name, n, peak) > 0) {
    return true;
  }
  fault_set_at (fault, MESSAGE_LABORATORY_NAME, s->text_at,
                arena_format (fault->arena, "%s:%d:%d", s->text, part->line, part->column),
                arena_format (fault->arena, "'%s' has more than one meaning: %s", part->name,
                              candidates));
  fault_facts (fault, arena_format (fault->arena, "for all of them define it first, as a list or "
                                    "with what is known: gas %s with molar mass ...", part->name),
               NULL);
  return false;
}

/* A sample as a list of parts, as if it were typed: a copy of the statement's list with the
   sample's parts.  *REMARKS, if not null, takes what has to be said of it.                      */
static struct node *
file_list (struct session *session, struct arena *arena, const struct statement *s,
           const struct laboratory *lab, size_t sample, struct remark **remarks,
           struct fault *fault)
{
  struct laboratory_parts parts;
  struct node *list = ARENA_NEW (arena, struct node);
  const char *zero = NULL;
  *list = *s->from_file;
  if (!laboratory_parts_of (lab, sample, arena, &parts, fault)) {
    place_in_statement (fault, s);
    return NULL;
  }
  bool dry = laboratory_moisture (lab) == LABORATORY_DRY;
  list->words |= dry ? WORD_DRY : 0;
  list->unit = usual_unit (&parts);
  struct node **link = &list->items;
  for (size_t i = 0; i < parts.count; i++) {
    const struct laboratory_part *part = &parts.at[i];
    bool drop;
    if (!lump_holds (session, s, part, fault)
        || !dry_holds (session, s, part, dry, &drop, fault)) {
      return NULL;
    }
    if (drop) {
      continue;
    }
    if (part->amount == LABORATORY_NOT_DETECTED || part->amount == LABORATORY_TRACE) {
      zero = zero ? arena_format (arena, "%s, %s", zero, part->name)
                  : arena_string (arena, part->name);
    }
    *link = part_node (arena, s, part, list->unit);
    link = &(*link)->next;
  }
  if (remarks && zero) {
    add_remark (arena, remarks, MESSAGE_NOTE_FILE_ZERO, s->text, zero);
  }
  if (remarks && parts.left_out) {
    add_remark (arena, remarks, MESSAGE_NOTE_FILE_LEFT_OUT, s->text,
                arena_string (arena, parts.left_out));
  }
  return list;
}

struct remark *
file_remarks (struct arena *arena, const char *path, const struct laboratory *lab)
{
  const struct laboratory_said *said = laboratory_said (lab);
  struct remark *remarks = NULL;
  add_remark (arena, &remarks, MESSAGE_NOTE_FILE, path,
              arena_format (arena, "%s%s%s", said->layout, said->units ? "; " : "",
                            said->units ? said->units : ""));
  add_remark (arena, &remarks, MESSAGE_NOTE_FILE, path, arena_string (arena, said->form));
  if (said->passed) {
    add_remark (arena, &remarks, MESSAGE_NOTE_FILE_PASSED, path,
                arena_string (arena, said->passed));
  }
  if (said->expanded) {
    add_remark (arena, &remarks, MESSAGE_NOTE_FILE_EXPANDED, path, NULL);
  }
  if (said->windows_1252) {
    add_remark (arena, &remarks, MESSAGE_NOTE_FILE_WINDOWS, path, NULL);
  }
  return remarks;
}

/* ---- A gas from a file ---- */

bool
file_bind (struct session *session, struct definition *d, struct statement *s,
           struct fault *fault)
{
  struct file_read *file = ARENA_NEW (d->arena, struct file_read);
  struct arena *aside = arena_create ();
  size_t sample = 0;
  bool done = false;
  file->path = s->text;
  look_at (file);
  const struct laboratory *lab = file_analyses (session, aside, s, fault);
  if (lab && !laboratory_find (lab, s->sample, &sample, fault)) {
    place_in_statement (fault, s);
  } else if (lab) {
    file->remarks = file_remarks (d->arena, s->text, lab);
    struct node *list = file_list (session, d->arena, s, lab, sample, &file->remarks, fault);
    if (list) {
      *s->from_file = *list;
      d->file = file;
      done = true;
    }
  }
  arena_destroy (aside);
  return done;
}

/* A remark of a single sample, unless another one had the same.  */
static void
add_once (struct file_samples *samples, const struct remark *remark)
{
  struct result *told = samples->told;
  for (const struct remark *r = told->notes; r; r = r->next)
    if (r->kind == remark->kind && strcmp (r->fact[1], remark->fact[1]) == 0) {
      return;
    }
  result_remark (told, remark->kind, remark->fact[0], arena_string (told->arena,
                                                                    remark->fact[1]));
  samples->told_count++;
}

void
file_tell_assumed (const struct evaluation *ev, struct result *result)
{
  for (size_t i = 0; i < ev->assumption_count; i++) {
    const struct assumption *a = &ev->assumptions[i];
    if (a->kind != MESSAGE_TAKEN_BELOW_DETECTION && a->kind != MESSAGE_TAKEN_PEAK) {
      continue;
    }
    bool known = false;
    for (const struct remark *r = result->taken; r && !known; r = r->next) {
      known = r->kind == a->kind && strcmp (r->fact[0], a->fact[0]) == 0
              && strcmp (r->fact[1], a->fact[1]) == 0;
    }
    if (known) {
      continue;
    }
    struct arena *arena = result->arena;
    struct remark *remark = result_remark (result, a->kind, arena_string (arena, a->fact[0]),
                                           arena_string (arena, a->fact[1]));
    remark->fact[2] = a->fact[2] ? arena_string (arena, a->fact[2]) : NULL;
  }
}

bool
file_samples (struct session *session, struct arena *arena, const char *source,
              struct file_samples *samples, struct fault *fault)
{
  struct parser *parser = parser_create (arena, &session->vocabulary, source, strlen (source), 1,
                                         BLOCK_NONE);
  struct statement *statement;
  if (!parser_next (parser, &statement, fault)) {
    return false;
  }
  samples->statement = statement;
  samples->typed = *statement->from_file;
  samples->laboratory = file_analyses (session, arena, statement, fault);
  return samples->laboratory != NULL;
}

const struct node *
file_sample (struct session *session, struct arena *arena, struct file_samples *samples, size_t i,
             struct fault *fault)
{
  enum { REMARKS_MOST = 6 };               /* of single samples, under one answer */
  struct statement *s = samples->statement;
  struct remark *remarks = NULL;
  *s->from_file = samples->typed;
  const struct node *list = file_list (session, arena, s, samples->laboratory, i, &remarks,
                                       fault);
  if (!list) {
    return NULL;
  }
  for (; remarks && samples->told && samples->told_count < REMARKS_MOST;
       remarks = remarks->next) {
    add_once (samples, remarks);
  }
  *s->from_file = *list;
  return s->value;
}

void
file_tell (const struct definition *d, struct result *result)
{
  for (const struct remark *r = d->file ? d->file->remarks : NULL; r; r = r->next) {
    result_remark (result, r->kind, r->fact[0], r->fact[1]);
  }
}

static void
tell_change (const struct definition *d, struct result *result)
{
  struct file_read now = { .path = d->file->path };
  look_at (&now);
  if (now.size == d->file->size && now.seconds == d->file->seconds
      && now.nanoseconds == d->file->nanoseconds) {
    return;
  }
  struct remark *remark = result_remark (result, MESSAGE_NOTE_FILE_CHANGED, d->file->path,
                                         now.size < 0 ? "is no longer there"
                                                      : "has changed since it was read");
  remark->fact[2] = d->name;
}

void
file_tell_changes (struct session *session, struct definition *d, struct result *result)
{
  for (size_t i = 0; i < session->count; i++) {
    struct definition *other = session->order[i];
    if (other->file && (other == d || definition_leans (session, d, other->name))) {
      tell_change (other, result);
    }
  }
}
