#include "config.h"

#include "libtest.h"
#include "balance/network.h"

/* Two components; a burner with two reactions behind a mixer.  */
static void
counts_columns (void)
{
  static const double nu[] = { -1, 1 };
  static const struct reaction reactions[] = { { nu }, { nu } };
  static const struct boundary boundaries[] = {
    { .kind = BOUNDARY_MIX },
    { .kind = BOUNDARY_REACT, .reaction_count = 2, .reactions = reactions },
    { .kind = BOUNDARY_REACT, .reaction_count = 1, .reactions = reactions }
  };
  static const struct network network = { .components = 2, .streams = 3, .boundaries = 3,
                                          .boundary = boundaries };
  SAME_INT (network_columns (&network), 9);
  SAME_INT (network_extent (&network, 1), 6);
  SAME_INT (network_extent (&network, 2), 8);
}

static void
forms_are_linear (void)
{
  static const struct term terms[] = { { 0, 2.0 }, { 3, -1.0 } };
  static const struct form form = { 2, terms }, empty = { 0, NULL };
  const double v[] = { 5, 100, 100, 4 };
  NEAR (form_value (&form, v), 6.0, 0);
  NEAR (form_value (&empty, v), 0.0, 0);
}

static const struct test_case cases[] = {
  { "extents stand behind the component flows", counts_columns },
  { "a form adds up its terms", forms_are_linear },
  { NULL, NULL }
};

int
main (int argc, char *argv[])
{
  return test_main (argc, argv, cases);
}
