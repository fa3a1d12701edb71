#include "config.h"
#include "modules/language/tree_print.h"

#include <string.h>
#include "support/text.h"
#include "units/unit.h"
#include "language/tree.h"

static void print (struct text *out, const struct node *node);

/* TEXT with its blanks as hyphens: gas-model.  */
static void
print_joined (struct text *out, const char *text)
{
  for (; *text != '\0'; text++)
    text_add_char (out, (char) (*text == ' ' ? '-' : *text));
}

static void
print_words (struct text *out, unsigned words)
{
  static const char *const names[] = { "dry", "wet", "real", "ideal", "gross", "net" };
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
    if ((words & (1u << i)) != 0)
      text_add_format (out, " %s", names[i]);
}

static const char *
property_text (enum property property)
{
  static const char *const names[] = {
#define PROPERTY(name, text, unit, help) text,
#include "language/properties.def"
#undef PROPERTY
  };
  return names[property];
}

static void
print_name (struct text *out, const char *text, bool quoted)
{
  text_add_format (out, quoted ? "\"%s\"" : "%s", text);
}

/* The figure as typed, without the marks that group its digits.  */
static void
print_figure (struct text *out, const char *figure)
{
  for (; *figure != '\0'; figure++)
    if (*figure != '_')
      text_add_char (out, *figure);
}

static void
print_spread (struct text *out, const struct spread *spread)
{
  if (spread == NULL)
    return;
  text_add (out, " (pm ");
  print_figure (out, spread->figure);
  if (spread->relative)
    text_add (out, " %");
  else if (spread->unit != NULL)
    text_add_format (out, " %s", spread->unit->spelling);
  if (spread->kind == SPREAD_EXPANDED)
    text_add_format (out, " (k %g)", spread->k);
  else if (spread->kind == SPREAD_LIMITS)
    text_add (out, " (limits)");
  text_add_char (out, ')');
}

/* Figure, unit, words and spread, without a bracket.  */
static void
print_bare_quantity (struct text *out, const struct node *node)
{
  if (node->a != NULL)
    print (out, node->a);
  else
    print_figure (out, node->figure);
  if (node->unit != NULL)
    text_add_format (out, " %s", node->unit_text);
  print_words (out, node->words);
  print_spread (out, node->spread);
}

static void
print_quantity (struct text *out, const struct node *node)
{
  text_add (out, "(q ");
  print_bare_quantity (out, node);
  text_add_char (out, ')');
}

static bool
is_plain_number (const struct node *node)
{
  return node->kind == NODE_QUANTITY && node->unit == NULL && node->spread == NULL;
}

static void
print_label (struct text *out, const char *label, const struct node *value)
{
  text_add_format (out, "(%s ", label);
  if (value->kind == NODE_QUANTITY)
    print_quantity (out, value);
  else
    print (out, value);
  text_add_char (out, ')');
}

static const char *
kind_of_figure (const struct node *figure)
{
  switch ((int) figure->unit->sort) {
  case UNIT_POINT: return "T";
  case UNIT_HUMIDITY: return "RH";
  case UNIT_OXYGEN: return "O2";
  default: return "P";
  }
}

static void
print_item (struct text *out, const struct node *item)
{
  switch ((int) item->kind) {
  case NODE_QUANTITY: print_label (out, kind_of_figure (item), item); break;
  case NODE_SITE_PRESSURE: text_add (out, "(site-pressure)"); break;
  case NODE_ITEM_Z: print_label (out, "Z", item->a); break;
  case NODE_ITEM_WATER: print_label (out, "water", item->a); break;
  case NODE_ITEM_DEW_POINT: print_label (out, "dew point", item->a); break;
  case NODE_ITEM_SATURATED: text_add (out, "saturated"); break;
  case NODE_ITEM_DRY: text_add (out, "dry"); break;
  case NODE_ITEM_IDEAL: text_add (out, "ideal"); break;
  case NODE_ITEM_REAL: text_add (out, "real"); break;
  default: print (out, item); break;
  }
}

static void
print_items (struct text *out, const struct node *state)
{
  for (const struct node *item = state->items; item != NULL; item = item->next) {
    text_add_char (out, ' ');
    print_item (out, item);
  }
}

static void
print_part (struct text *out, const struct node *part)
{
  const struct node *a = part->a;
  text_add_char (out, '(');
  print_name (out, part->text, part->quoted);
  text_add_char (out, ' ');
  if (part->rest)
    text_add (out, "rest");
  else if (a->kind != NODE_QUANTITY || a->a != NULL) {
    print (out, a);
    if (part->unit != NULL)
      text_add_format (out, " %s", part->unit_text);
  }
  else if (is_plain_number (a) && !part->below)
    print_figure (out, a->figure);
  else {
    text_add (out, part->below ? "(< " : "(");
    print_bare_quantity (out, a);
    text_add_char (out, ')');
  }
  text_add_char (out, ')');
}

static void
print_basis (struct text *out, const struct node *list)
{
  if (list->unit == NULL && list->words == 0)
    return;
  text_add (out, " (basis");
  if (list->unit != NULL)
    text_add_format (out, " %s", list->unit_text);
  print_words (out, list->words);
  text_add_char (out, ')');
}

static void
print_list (struct text *out, const struct node *list)
{
  text_add (out, "(mix");
  for (const struct node *part = list->items; part != NULL; part = part->next) {
    text_add_char (out, ' ');
    print_part (out, part);
  }
  print_basis (out, list);
  text_add_char (out, ')');
}

static void
print_optional (struct text *out, const char *label, const struct node *name)
{
  if (name == NULL)
    return;
  text_add_format (out, " (%s ", label);
  print (out, name);
  text_add_char (out, ')');
}

static const char *
head_of (enum node_kind kind)
{
  switch ((int) kind) {
  case NODE_OF: return "of";
  case NODE_WITHIN: return "within";
  case NODE_AT: return "at";
  case NODE_NORMALISED: return "normalised";
  case NODE_DRIED: return "dried";
  case NODE_WETTED: return "wetted";
  case NODE_SATURATED: return "saturated";
  case NODE_WITHOUT: return "without";
  case NODE_KEEPING: return "keeping";
  case NODE_ADD: return "+";
  case NODE_SUBTRACT: case NODE_NEGATE: return "-";
  case NODE_MULTIPLY: return "*";
  case NODE_DIVIDE: return "/";
  case NODE_SQRT: return "sqrt";
  case NODE_LN: return "ln";
  case NODE_EXP: return "exp";
  default: return "?";
  }
}

static void
print_shares (struct text *out, const struct node *keeping)
{
  for (const struct node *share = keeping->items; share != NULL; share = share->next) {
    text_add (out, " (");
    print_name (out, share->text, share->quoted);
    text_add_char (out, ' ');
    print (out, share->a);
    text_add_char (out, ')');
  }
}

/* A node with operands: its head, then what belongs to it.  */
static void
print_branch (struct text *out, const struct node *node)
{
  text_add_format (out, "(%s ", head_of (node->kind));
  print (out, node->a);
  switch ((int) node->kind) {
  case NODE_AT: case NODE_SATURATED: print_items (out, node->b); break;
  case NODE_NORMALISED: print_optional (out, "into", node->b); break;
  case NODE_KEEPING: print_shares (out, node); break;
  default:
    if (node->b != NULL) {
      text_add_char (out, ' ');
      print (out, node->b);
    }
    if (node->kind == NODE_WITHOUT)
      print_optional (out, "by", node->c);
    break;
  }
  text_add_char (out, ')');
}

static void
print (struct text *out, const struct node *node)
{
  switch ((int) node->kind) {
  case NODE_QUANTITY:
    if (is_plain_number (node))
      print_figure (out, node->figure);
    else
      print_quantity (out, node);
    break;
  case NODE_NAME: print_name (out, node->text, node->quoted); break;
  case NODE_SITE_PRESSURE: text_add (out, "site-pressure"); break;
  case NODE_PROPERTY:
    print_joined (out, property_text (node->property));
    text_add (out, node->by == STANDARD_NONE ? "" : node->by == STANDARD_AS_SET ? "-by-ISO-6976"
              : node->by == STANDARD_2016 ? "-by-ISO-6976:2016" : "-by-ISO-6976:1995");
    break;
  case NODE_THAT: text_add (out, "that"); break;
  case NODE_LIST: print_list (out, node); break;
  default: print_branch (out, node); break;
  }
}

static void
print_targets (struct text *out, const struct target *target)
{
  for (; target != NULL; target = target->next) {
    text_add_format (out, " (to %s", target->unit_text);
    print_words (out, target->words);
    print_optional (out, "counted-as", target->counted_as);
    print_optional (out, "burning", target->burning);
    print_optional (out, "by", target->tracer);
    if (target->factor != NULL) {
      text_add (out, " (");
      print_joined (out, property_text (target->factor->property));
      text_add_char (out, ' ');
      print (out, target->factor->quantity);
      text_add_char (out, ')');
    }
    if (target->state != NULL) {
      text_add (out, " (at");
      print_items (out, target->state);
      text_add_char (out, ')');
    }
    if (target->with != NULL) {
      text_add (out, " (with");
      print_items (out, target->with);
      text_add_char (out, ')');
    }
    if (target->as != NULL)
      text_add_format (out, " (as %s)", target->as);
    text_add_char (out, ')');
  }
}

/* Nodes that hang together by `next`, parted by blanks.  */
static void
print_each (struct text *out, const struct node *node)
{
  for (; node != NULL; node = node->next) {
    text_add_char (out, ' ');
    print (out, node);
  }
}

/* A stated figure and the state it is at, side by side.  */
static void
print_claim (struct text *out, const struct node *claim)
{
  print_quantity (out, claim->kind == NODE_AT ? claim->a : claim);
  if (claim->kind != NODE_AT)
    return;
  text_add (out, " (at");
  print_items (out, claim->b);
  text_add_char (out, ')');
}

static void
print_set (struct text *out, const struct statement *s)
{
  static const char *const settings[] = {
#define SETTING(name, text, takes) text,
#include "language/settings.def"
#undef SETTING
  };
  text_add (out, "(set");
  if (s->has_setting) {
    text_add_char (out, ' ');
    print_joined (out, settings[s->setting]);
    text_add (out, s->value != NULL || s->setting_words != NULL ? " " : "");
    if (s->value != NULL)
      print_quantity (out, s->value);
    else if (s->setting_words != NULL)
      print_joined (out, s->setting_words);
  }
  else if (s->setting_unit != NULL) {
    text_add_format (out, " %s (at", s->setting_unit->spelling);
    print_items (out, s->value);
    text_add_char (out, ')');
  }
  text_add_char (out, ')');
}

static void
print_gas (struct text *out, const struct statement *s)
{
  text_add_format (out, "(gas %s", s->name);
  for (const struct stated_property *p = s->stated; p != NULL; p = p->next) {
    text_add (out, " (");
    print_joined (out, property_text (p->property));
    text_add_char (out, ' ');
    print_quantity (out, p->quantity);
    text_add_char (out, ')');
  }
  if (s->text != NULL)
    text_add_format (out, " (from \"%s\")", s->text);
  if (s->sample != NULL)
    text_add_format (out, " (sample \"%s\")", s->sample);
  if (s->text != NULL && s->value == s->from_file)
    print_basis (out, s->value);
  else if (s->value != NULL)
    print_each (out, s->value);
  text_add_char (out, ')');
}

static void
print_trim (struct text *out, const struct statement *s)
{
  static const char *const signs[] = { "=", ">=", "<=" };
  text_add (out, "(trim (names");
  for (const struct node *name = s->names; name != NULL; name = name->next) {
    text_add_char (out, ' ');
    print (out, name);
    if (name->a != NULL) {
      text_add (out, " (from ");
      print (out, name->a);
      text_add_char (out, ' ');
      print (out, name->b);
      text_add_char (out, ')');
    }
  }
  text_add_char (out, ')');
  for (const struct aim *aim = s->aims; aim != NULL; aim = aim->next) {
    text_add_format (out, " (%s ", signs[aim->is]);
    print (out, aim->left);
    text_add_char (out, ' ');
    print (out, aim->right);
    text_add_char (out, ')');
  }
  if (s->optimum != OPTIMUM_NONE)
    print_optional (out, s->optimum == OPTIMUM_LEAST ? "least" : "most", s->least);
  text_add_char (out, ')');
}

/* (WORD NAME TEXT value targets): what most statements come to.  */
static void
print_plain (struct text *out, const char *word, const struct statement *s)
{
  text_add_format (out, "(%s", word);
  if (s->name != NULL)
    text_add_format (out, " %s", s->name);
  else if (s->has_property)
    print_joined (out, (text_add_char (out, ' '), property_text (s->property)));
  else if (s->unit != NULL)
    text_add_format (out, " %s", s->unit->spelling);
  if (s->text != NULL)
    text_add_format (out, " \"%s\"", s->text);
  if (s->help_words != NULL)
    text_add_format (out, " %s", s->help_words);
  print_each (out, s->names);
  if (s->value != NULL && s->value->kind == NODE_STATE)
    print_items (out, s->value);
  else if (s->value != NULL)
    print_each (out, s->value);
  print_targets (out, s->targets);
  if (s->claim != NULL && s->kind == STATEMENT_CHECK) {
    text_add (out, " (claim ");
    print_claim (out, s->claim);
    text_add_char (out, ')');
  }
  else if (s->claim != NULL)
    print_each (out, s->claim);
  text_add_char (out, ')');
}

static void
print_trend (struct text *out, const struct statement *s)
{
  text_add (out, "(trend");
  print_each (out, s->value);
  print_targets (out, s->targets);
  if (s->names != NULL)
    text_add (out, " (with");
  for (const struct node *name = s->names; name != NULL; name = name->next)
    text_add_format (out, " %s%s", name->text, name->rest ? "*" : "");
  text_add (out, s->names != NULL ? "))" : ")");
}

static void
print_samples (struct text *out, const struct statement *s)
{
  text_add (out, "(show (samples");
  if (s->text != NULL)
    text_add_format (out, " \"%s\"", s->text);
  else
    text_add_format (out, " %s", s->name);
  if (s->value != NULL && s->value == s->from_file)
    print_basis (out, s->value);
  else if (s->value != NULL)
    print_each (out, s->value);
  text_add (out, "))");
}

static void
print_normalise (struct text *out, const struct statement *s)
{
  text_add_format (out, "(normalise %s", s->name);
  print_optional (out, "into", s->value->b);
  text_add_char (out, ')');
}

static void
print_boundary (struct text *out, const char *word, const struct statement *s)
{
  text_add_format (out, "(%s %s (flows", word, s->name);
  print_each (out, s->inlets);
  text_add (out, ") (flows");
  print_each (out, s->outlets);
  text_add (out, "))");
}

static void
print_sheet_figure (struct text *out, const struct statement *s)
{
  text_add (out, "(figure ");
  if (s->name != NULL)
    text_add_format (out, "%s ", s->name);
  text_add_char (out, '(');
  print_claim (out, s->claim);
  text_add (out, "))");
}

static const char *
word_of (enum statement_kind kind)
{
  switch (kind) {
#define STATEMENT(name, text, help) case STATEMENT_##name: return text;
#include "language/statements.def"
#undef STATEMENT
  case STATEMENT_ASK: return "ask";
  case STATEMENT_MIX: return "mix";
  case STATEMENT_SEPARATE: return "separate";
  case STATEMENT_SPLIT: return "split";
  case STATEMENT_COMPONENTS: return "components";
  case STATEMENT_KNOWN: return "known";
  case STATEMENT_ABSENT: return "absent";
  case STATEMENT_PER: return "per";
  case STATEMENT_AROUND: return "around";
  case STATEMENT_END: return "end";
  case STATEMENT_REACT: return "react";
  case STATEMENT_FIGURE: case STATEMENT_EMPTY: default: return "?";
  }
}

void
tree_print (struct text *out, const struct statement *s)
{
  const char *word = word_of (s->kind);
  switch ((int) s->kind) {
  case STATEMENT_SET: print_set (out, s); break;
  case STATEMENT_GAS: print_gas (out, s); break;
  case STATEMENT_TRIM: print_trim (out, s); break;
  case STATEMENT_NORMALISE: print_normalise (out, s); break;
  case STATEMENT_MIX: case STATEMENT_SEPARATE: case STATEMENT_SPLIT: case STATEMENT_REACT:
    print_boundary (out, word, s);
    break;
  case STATEMENT_FIGURE: print_sheet_figure (out, s); break;
  case STATEMENT_TREND: print_trend (out, s); break;
  default:
    if (s->samples)
      print_samples (out, s);
    else
      print_plain (out, word, s);
    break;
  }
}
