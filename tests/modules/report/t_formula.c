/* Formulas with their figures put in.  Expected texts are written by hand after the grammar in
   units/workings.h.                                                                             */
#include "config.h"

#include <stdint.h>

#include "libtest.h"
#include "report/formula.h"
#include "support/number.h"
#include "support/text.h"
#include "units/workings.h"

static void
exact (struct text *out, double value, const void *with)
{
  (void) with;
  number_write_exact (out, value);
}

static const struct formula_style style = { exact, NULL };

static const double x[] = { 0.5, 0.25 }, b[] = { 2, -3 };
static const char *const parts[] = { "CH4", "CO2" };
static const struct step_column columns[] = { { "x_i", x, "1", NULL, NULL },
                                              { "b_i", b, "1", NULL, NULL } };
static const struct step_symbol symbols[] = {
  { "R", 8, "1", NULL, NULL }, { "T", 300, "K", NULL, NULL }, { "T_0", -5, "K", NULL, NULL },
  { "exp_", 7, "1", NULL, NULL }
};

static void
figures_of (const char *formula, size_t term, const char *solved, const char *want)
{
  struct text out;
  const struct step step = { .name = "step", .formula = formula, .solved = solved,
                             .symbols = symbols, .symbol_count = 4, .terms = parts,
                             .term_count = 2, .columns = columns, .column_count = 2 };
  text_init (&out);
  formula_figures (&out, &step, term, &style);
  SAME_TEXT (out.length > 0 ? out.bytes : "", want);
  text_clear (&out);
}

static void
figures_go_in (void)
{
  figures_of ("V = R T/T_0", SIZE_MAX, NULL, "8 * 300/(-5)");
  figures_of ("y = R (T - T_0)^2 + 3 T", SIZE_MAX, NULL, "8 * (300 - (-5))^2 + 3 * 300");
  figures_of ("y = sqrt(R) exp(-T) min(R, T)", SIZE_MAX, NULL, "sqrt(8) * exp(-300) * min(8, 300)");
  figures_of ("y = exp_ unknown(T) q", SIZE_MAX, NULL, "7 * unknown(300) * q");
  figures_of ("y = -R", SIZE_MAX, NULL, "-8");
  figures_of ("", SIZE_MAX, NULL, "");
}

static void
sums_are_written_out (void)
{
  figures_of ("t = sum(x_i)", SIZE_MAX, NULL, "0.5 + 0.25");
  figures_of ("t = R sum(x_i b_i^2)", SIZE_MAX, NULL, "8 * (0.5 * 2^2 + 0.25 * (-3)^2)");
  figures_of ("t = sum(x_i)/sum(x_i/b_i)", SIZE_MAX, NULL, "(0.5 + 0.25)/(0.5/2 + 0.25/(-3))");
}

static void
terms_and_solutions (void)
{
  figures_of ("x_i = R b_i", 1, NULL, "8 * (-3)");
  figures_of ("R^2 = T (b_i)", 0, "by halving", "8^2 = 300 * (2)");
  const struct step each = { .formula = "x_i = R b_i", .columns = columns, .column_count = 2,
                             .terms = parts, .term_count = 2 };
  const struct step one = { .formula = "t = sum(x_i)", .columns = columns, .column_count = 2 };
  CHECK (formula_is_for_terms (&each) && formula_result (&each) == &columns[0]);
  CHECK (!formula_is_for_terms (&one) && formula_result (&one) == NULL);
}

static const struct test_case cases[] = {
  { "figures go in", figures_go_in },
  { "sums are written out", sums_are_written_out },
  { "terms and solutions", terms_and_solutions },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
