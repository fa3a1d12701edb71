#include "config.h"
#include <ctype.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "gas/species.h"
#include "libtest.h"
#include "support/arena.h"
#include "support/fault.h"
#include "support/map.h"
#include "support/table.h"

static struct arena *arena;
static struct fault fault;
static struct species_table *table;

static void
start (void)
{
  if (table != NULL)
    return;
  arena = arena_create ();
  fault_init (&fault, arena);
  table = species_table_create (NULL, &fault);
}

static const struct species *
find (const char *name, enum species_match want)
{
  const struct species *found = NULL;
  const char *candidates = NULL;

  test_about ("%s", name);
  SAME_INT (species_find (table, name, strlen (name), &found, &candidates), want);
  return found;
}

static void
leads_to (const char *name, enum species_match want, const char *key)
{
  const struct species *found = find (name, want);

  SAME_TEXT (found == NULL ? NULL : found->key, key);
}

/* Standard atomic weights of CIAAW 2021, summed apart from the program to 5 decimals.  */
static void
one_molar_mass (char *cells[])
{
  const struct species *found = find (cells[0], SPECIES_KEY);
  double want;

  if (CHECK (found != NULL) && CHECK (sscanf (cells[1], "%lf", &want) == 1))
    CHECK (fabs (found->molar_mass * 1e3 - want) <= 0.5000001e-5);
}

static void
molar_masses (void)
{
  start ();
  NEED (table != NULL);
  SAME_INT (species_table_size (table), 200);
  SAME_INT (test_each_row ("numbers/molar_masses.tsv", 3, one_molar_mass), 200);
}

/* Figures read in the sources named by the rows, against the SI figures of the program.  */
static void
constants (void)
{
  const struct species *one;

  start ();
  NEED (table != NULL);
  one = find ("CO2", SPECIES_KEY);
  NEED (one != NULL);
  NEAR (one->critical_temperature, 304.128, 1e-12);      /* Huber et al. (2022) */
  NEAR (one->critical_pressure, 7377.3e3, 1e-12);
  NEAR (one->critical_molar_volume, 94.118e-6, 1e-12);
  NEAR (one->acentric_factor, 0.2239, 1e-12);
  NEAR (one->boiling_point, 194.686, 1e-12);             /* CRC Handbook (2014): sublimes */
  CHECK (one->sublimes);
  SAME_TEXT (one->source, "Tc pc Vc omega Huber 2022; Tb CRC 2014");
  SAME_TEXT (one->cas, "124-38-9");
  CHECK (one->origin == SPECIES_TABLE);
  one = find ("H2", SPECIES_KEY);
  NEED (one != NULL);
  NEAR (one->acentric_factor, -0.219, 1e-12);            /* Huber et al. (2022): below zero */
  CHECK (!one->sublimes);
  one = find ("BCl3", SPECIES_KEY);
  NEED (one != NULL);
  CHECK (isnan (one->critical_molar_volume));            /* none in the sources */
}

static void
hazards (void)
{
  const struct species *one;

  start ();
  NEED (table != NULL);
  one = find ("H2S", SPECIES_KEY);
  NEED (one != NULL);
  NEAR (one->exposure_limit, 5e-6, 1e-12);               /* Directive 2009/161/EU: 5 ppm */
  SAME_TEXT (one->exposure_source, "2009/161/EU");
  SAME_TEXT (one->flags, "flammable|toxic");
  NEAR (one->lower_flammable, 0.04, 1e-12);              /* IEC 60079-20-1:2010 */
  NEAR (one->upper_flammable, 0.455, 1e-12);
  one = find ("C2N2", SPECIES_KEY);
  NEED (one != NULL);
  NEAR (one->exposure_limit, 10e-6, 1e-12);              /* Ontario Regulation 833: 10 ppm */
  SAME_TEXT (one->exposure_source, "Ontario Reg. 833");
  one = find ("N2", SPECIES_KEY);
  NEED (one != NULL);
  CHECK (isnan (one->exposure_limit));
  SAME_TEXT (one->exposure_source, "");
  CHECK (isnan (one->lower_flammable) && isnan (one->upper_flammable));
  one = find ("D3", SPECIES_KEY);                        /* no row in either table */
  NEED (one != NULL);
  SAME_TEXT (one->flags, "");
}

static void
names (void)
{
  static const struct { const char *name; enum species_match how; const char *key; } cases[] = {
    { "CH4", SPECIES_KEY, "CH4" },
    { "CH\xE2\x82\x84", SPECIES_KEY, "CH4" },
    { "C1", SPECIES_SYNONYM, "CH4" },
    { "C2", SPECIES_SYNONYM, "C2H6" },
    { "C3", SPECIES_SYNONYM, "C3H8" },
    { "iC4", SPECIES_SYNONYM, "iC4H10" },
    { "i-butane", SPECIES_SYNONYM, "iC4H10" },
    { "isobutane", SPECIES_SYNONYM, "iC4H10" },
    { "iso-butane", SPECIES_SYNONYM, "iC4H10" },
    { "Isobutane", SPECIES_SYNONYM, "iC4H10" },
    { "nC4", SPECIES_SYNONYM, "nC4H10" },
    { "n-butane", SPECIES_SYNONYM, "nC4H10" },
    { "butane", SPECIES_SYNONYM, "nC4H10" },
    { "iC5", SPECIES_SYNONYM, "iC5H12" },
    { "nC5", SPECIES_SYNONYM, "nC5H12" },
    { "WATER", SPECIES_SYNONYM, "H2O" },
    { "steam", SPECIES_SYNONYM, "H2O" },
    { "carbon dioxide", SPECIES_SYNONYM, "CO2" },
    { "hydrogen sulphide", SPECIES_SYNONYM, "H2S" },
    { "1-butene", SPECIES_SYNONYM, "n1C4H8" },
    { "R-134a", SPECIES_SYNONYM, "R134a" },
    { "Ni(CO)4", SPECIES_SYNONYM, "NiCO4" },
    { "IPA", SPECIES_SYNONYM, "iC3H7OH" },
    { "ipa", SPECIES_NONE, NULL },                       /* abbreviations are as written */
    { "an", SPECIES_NONE, NULL },
    { "EtO", SPECIES_SYNONYM, "EO" },
    { "ETO", SPECIES_SYNONYM, "EO" },
    { "CO", SPECIES_KEY, "CO" },
    { "Co", SPECIES_NONE, NULL },                        /* no cobalt by a slip of the hand */
    { "co2", SPECIES_NONE, NULL },
    { "raw", SPECIES_NONE, NULL },
    { "air", SPECIES_NONE, NULL },
    { "", SPECIES_NONE, NULL },
    { " ", SPECIES_NONE, NULL },
    { "C7H14O2", SPECIES_PLAIN_FORMULA, "C7H14O2" },
    { "S", SPECIES_PLAIN_FORMULA, "S" },
    { "Ca(OH)2", SPECIES_PLAIN_FORMULA, "Ca(OH)2" },
    { "Xx2", SPECIES_NONE, NULL },
  };

  start ();
  NEED (table != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++)
    leads_to (cases[i].name, cases[i].how, cases[i].key);
}

static void
long_names (void)
{
  char name[400];
  const struct species *found = NULL;
  const char *candidates = NULL;

  start ();
  NEED (table != NULL);
  for (size_t n = 1; n < sizeof name; n += 13) {
    memset (name, 'x', n);
    SAME_INT (species_find (table, name, n, &found, &candidates), SPECIES_NONE);
    CHECK (species_nearest (table, name, n) == NULL || n < 4);
    CHECK (species_longest_name (table, name, n) == 0);
    memset (name, 'C', n);                               /* CCC...: a formula while short enough */
    (void) species_find (table, name, n, &found, &candidates);
  }
}

static void
ambiguous (void)
{
  static const struct { const char *name, *candidates; } cases[] = {
    { "C4H10", "iC4H10, nC4H10" },
    { "C2H6O", "C2H5OH, DME" },
    { "butanes", "iC4H10, nC4H10" },
    { "Xylene", "oC8H10, mC8H10, pC8H10" },
    { "NOx", "NO, NO2" },
    { "natural gas", "CH4, C2H6, C3H8, N2, CO2" },
    { "VOC", "CH4, C3H8" },
  };

  start ();
  NEED (table != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    const struct species *found = NULL;
    const char *candidates = NULL;

    test_about ("%s", cases[i].name);
    SAME_INT (species_find (table, cases[i].name, strlen (cases[i].name), &found, &candidates),
              SPECIES_AMBIGUOUS);
    SAME_TEXT (candidates, cases[i].candidates);
    CHECK (found == NULL);
  }
}

/* Every candidate of an ambiguous name is a key of the table.  */
static void
candidates_exist (void)
{
  struct table *rows;

  start ();
  NEED (table != NULL);
  rows = table_read (arena, "ambiguous", NULL, &fault);
  NEED (rows != NULL);
  for (size_t i = 0; i < table_rows (rows); i++) {
    const char *at = table_cell (rows, i, table_column (rows, "candidates"));

    while (*at != '\0') {
      size_t n = strcspn (at, ",");
      const struct species *found = NULL;
      const char *candidates = NULL;

      test_about ("%s", at);
      SAME_INT (species_find (table, at, n, &found, &candidates), SPECIES_KEY);
      at += n + strspn (at + n, ", ");
    }
  }
}

/* No spelling leads two ways: names that differ in capitals, blanks and hyphens alone belong to
   one component.                                                                               */
struct collision { struct map *owners; const char *key; };

static void
meets (struct collision *collision, const char *name, size_t n)
{
  char squeezed[200];
  size_t length = 0;
  const char *owner;

  for (size_t i = 0; i < n && length < sizeof squeezed; i++)
    if (name[i] != ' ' && name[i] != '-')
      squeezed[length++] = (char) tolower ((unsigned char) name[i]);
  owner = map_find (collision->owners, squeezed, length);
  test_about ("%.*s", (int) n, name);
  if (owner != NULL)
    SAME_TEXT (owner, collision->key);
  map_put (collision->owners, squeezed, length, arena_string (arena, collision->key));
}

static void
no_collisions (void)
{
  struct collision collision = { NULL, NULL };
  struct table *rows;

  start ();
  NEED (table != NULL);
  rows = table_read (arena, "ambiguous", NULL, &fault);
  NEED (rows != NULL);
  collision.owners = map_create ();
  for (size_t i = 0; i < species_table_size (table); i++) {
    const struct species *one = species_table_at (table, i);

    collision.key = one->key;
    meets (&collision, one->key, strlen (one->key));
    meets (&collision, one->name, strlen (one->name));
    for (const char *at = one->synonyms; *at != '\0'; at += *at == '|') {
      size_t n = strcspn (at, "|");

      CHECK (n > 0);
      meets (&collision, at, n);
      at += n;
    }
  }
  for (size_t i = 0; i < table_rows (rows); i++) {
    collision.key = "an ambiguous name";
    meets (&collision, table_cell (rows, i, 0), strlen (table_cell (rows, i, 0)));
  }
  CHECK (map_size (collision.owners) > 900);
  map_destroy (collision.owners);
}

/* Every key, name and synonym finds its own component.  */
static void
finds_again (const char *name, void *with)
{
  const struct species *found = NULL;
  const char *candidates = NULL;
  enum species_match match = species_find (table, name, strlen (name), &found, &candidates);

  test_about ("%s", name);
  CHECK (match == SPECIES_KEY || match == SPECIES_SYNONYM);
  ++*(size_t *) with;
}

static void
every_name (void)
{
  size_t count = 0;

  start ();
  NEED (table != NULL);
  species_each_name (table, finds_again, &count);
  CHECK (count > 900);
}

static void
longest_names (void)
{
  static const struct { const char *text; size_t bytes; } cases[] = {
    { "carbon dioxide 39.1, methane rest mol%", 14 },
    { "Carbon Dioxide", 14 },
    { "dry air in Nm3/h", 7 },
    { "vinyl chloride", 14 },
    { "vinyl chloride monomer, N2 rest", 22 },
    { "natural gas at 15 degC", 11 },
    { "methyl acetylene 5", 16 },
    { "carbon  dioxide", 0 },                            /* two blanks */
    { "carbon dioxides", 0 },
    { "methane rest", 0 },
    { "air", 0 },
    { "C 4", 0 },                                        /* an amount, no name in two words */
    { "R 22 mol%", 0 },
    { "carbon", 0 },
    { "carbon ", 0 },
    { "", 0 },
  };

  start ();
  NEED (table != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    test_about ("%s", cases[i].text);
    SAME_INT (species_longest_name (table, cases[i].text, strlen (cases[i].text)),
              cases[i].bytes);
  }
  SAME_INT (species_longest_name (table, "carbon dioxide", 10), 0);      /* cut short */
}

static void
nearest (void)
{
  static const struct { const char *name, *key; } cases[] = {
    { "carbon dioxyde", "CO2" }, { "metane", "CH4" }, { "propan", "C3H8" }, { "co2", "CO2" },
    { "Co", "CO" }, { "amonia", "NH3" }, { "isobutan", "iC4H10" }, { "quicksilver", NULL },
  };

  start ();
  NEED (table != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    test_about ("%s", cases[i].name);
    SAME_TEXT (species_nearest (table, cases[i].name, strlen (cases[i].name)), cases[i].key);
  }
}

static void
made_once (void)
{
  const struct species *a, *b;

  start ();
  NEED (table != NULL);
  a = find ("C7H14O2", SPECIES_PLAIN_FORMULA);
  b = find ("O2C7H14", SPECIES_PLAIN_FORMULA);           /* the same atoms */
  CHECK (a != NULL && a == b);
  SAME_INT (species_table_size (table), 200);
  NEED (a != NULL);
  SAME_TEXT (a->formula, "C7H14O2");
  SAME_TEXT (a->flags, "");
  CHECK (a->origin == SPECIES_FORMULA);
  CHECK (isnan (a->critical_temperature) && isnan (a->acentric_factor));
  a = species_stated (table, "sales", &(struct stated_figures) { 19.8e-3, 0, 0 });
  CHECK (a == species_stated (table, "sales", &(struct stated_figures) { 19.8e-3, 0, 0 }));
  CHECK (a != species_stated (table, "sales", &(struct stated_figures) { 19.9e-3, 0, 0 }));
  CHECK (a != species_stated (table, "other", &(struct stated_figures) { 19.8e-3, 0, 0 }));
  SAME_TEXT (a->key, "sales");
  NEAR (a->molar_mass, 19.8e-3, 1e-15);
  NEAR (species_atoms (a, "C"), 0, 1e-15);
  CHECK (a->origin == SPECIES_STATED);
}

/* A user's tables: a component of their own, one that replaces a row, a limit of their own.  */
static char directory[] = "species-XXXXXX";

static bool
write_file (const char *name, const char *text)
{
  char path[100];
  FILE *file;

  snprintf (path, sizeof path, "%s/%s.tsv", directory, name);
  file = fopen (path, "w");
  if (file == NULL)
    return false;
  fputs (text, file);
  return fclose (file) == 0;
}

static void
remove_files (void)
{
  static const char *const names_of_files[] = { "species", "exposure", "ambiguous" };

  for (size_t i = 0; i < sizeof names_of_files / sizeof names_of_files[0]; i++) {
    char path[100];

    snprintf (path, sizeof path, "%s/%s.tsv", directory, names_of_files[i]);
    (void) remove (path);
  }
}

static struct species_table *
create (struct fault *users_fault)
{
  start ();
  fault_init (users_fault, arena);
  return species_table_create (directory, users_fault);
}

static void
look_at_users (struct species_table *users)
{
  const struct species *found = NULL;
  const char *candidates = NULL;

  SAME_INT (species_table_size (users), 201);
  SAME_INT (species_find (users, "larkmoor tracer", 15, &found, &candidates), SPECIES_SYNONYM);
  SAME_TEXT (found->key, "LT1");
  CHECK (found->origin == SPECIES_USERS);
  NEAR (found->molar_mass * 1e3, 11 * 12.011, 1e-12);    /* C 12.011: CIAAW 2021 */
  CHECK (isnan (found->boiling_point));
  SAME_INT (species_find (users, "CH4", 3, &found, &candidates), SPECIES_KEY);
  CHECK (found->origin == SPECIES_USERS);
  NEAR (found->critical_temperature, 190.6, 1e-12);
  SAME_TEXT (found->source, "our laboratory");
  SAME_INT (species_find (users, "N2", 2, &found, &candidates), SPECIES_KEY);
  CHECK (found->origin == SPECIES_TABLE);
  SAME_INT (species_find (users, "H2S", 3, &found, &candidates), SPECIES_KEY);
  NEAR (found->exposure_limit, 1e-6, 1e-12);
  SAME_TEXT (found->exposure_source, "site rule 7");
  SAME_INT (species_find (users, "site gas", 8, &found, &candidates), SPECIES_AMBIGUOUS);
  SAME_TEXT (candidates, "CH4, LT1");
}

static void
users_rows (void)
{
  struct fault users_fault;
  struct species_table *users;

  NEED (mkdtemp (directory) != NULL);
  CHECK (write_file ("species", "key\tname\tsynonyms\tformula\tT_critical_K\tsource\n"
                     "LT1\tlarkmoor tracer\tLarkmoor one\tC11\t\tour laboratory\n"
                     "CH4\tmethane\tC1\tCH4\t190.6\tour laboratory\n"));
  CHECK (write_file ("exposure", "key\tflags\tEU_8h_ppm\tEU_directive\tsource\n"
                     "H2S\ttoxic\t1\tsite rule 7\tsite\n"));
  CHECK (write_file ("ambiguous", "name\tcandidates\tsource\nsite gas\tCH4, LT1\tsite\n"));
  users = create (&users_fault);
  if (CHECK (users != NULL))
    look_at_users (users);
  species_table_destroy (users);
  remove_files ();
  CHECK (remove (directory) == 0);
}

static void
users_mistakes (void)
{
  static const struct { const char *table, *text, *says; } cases[] = {
    { "species", "key\tformula\tsource\nA1\tXx\tus\n",
      "the formula has an element of no known weight" },
    { "species", "key\tformula\tsource\nA1\t\tus\n", "no chemical formula" },
    { "species", "key\tformula\tp_critical_kPa\tsource\nA1\tCH4\t-5\tus\n",
      "this figure is above 0, or missing" },
    { "exposure", "key\tflags\tsource\nA1\ttoxic\tus\n", "no component has this key" },
    { "ambiguous", "name\tcandidates\tsource\nlump\t\tus\n",
      "a name and its candidates are expected" },
  };

  strcpy (directory, "species-XXXXXX");
  NEED (mkdtemp (directory) != NULL);
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    struct fault users_fault;
    struct species_table *users;

    test_about ("%s", cases[i].says);
    CHECK (write_file (cases[i].table, cases[i].text));
    users = create (&users_fault);
    CHECK (users == NULL);
    SAME_INT (users_fault.kind, MESSAGE_TABLE_ROW);
    SAME_TEXT (users_fault.fact[1], "2");
    SAME_TEXT (users_fault.fact[2], cases[i].says);
    species_table_destroy (users);
    remove_files ();
  }
  CHECK (remove (directory) == 0);
}

int
main (int argc, char *argv[])
{
  static const struct test_case cases[] = {
    { "molar masses follow from the formulas", molar_masses },
    { "constants are in SI, missing ones are missing", constants },
    { "limits of exposure and of flammability", hazards },
    { "names lead to their components", names },
    { "names of any length are looked at", long_names },
    { "what fits several components is asked back", ambiguous },
    { "candidates are keys", candidates_exist },
    { "no two components share a spelling", no_collisions },
    { "every name finds its component", every_name },
    { "names of several words are read to their end", longest_names },
    { "a misspelt name has a nearest one", nearest },
    { "formulas and stated gases are made once", made_once },
    { "a user's rows add and replace", users_rows },
    { "mistakes in a user's rows are told", users_mistakes },
    { NULL, NULL }
  };
  int status = test_main (argc, argv, cases);

  species_table_destroy (table);
  arena_destroy (arena);
  return status;
}
