/* A suite of good and bad cases, to prove that the runner tells them apart.  */
#include "config.h"
#include "libtest.h"

#include <math.h>
#include <string.h>

static void
good (void)
{
  CHECK (1 + 1 == 2);
  NEAR (1.0 + 1e-12, 1.0, 1e-11);
  NEAR (-1e-13, 0.0, 1e-12);
  SAME_TEXT ("air", "air");
  SAME_TEXT (NULL, NULL);
  SAME_INT (-3, -3);
}

static void
condition (void)
{
  CHECK (strlen ("air") == 4);
}

static void
far_off (void)
{
  test_about ("seed %d", 41);
  NEAR (1.0 + 1e-10, 1.0, 1e-11);
}

static void
no_number (void)
{
  NEAR ((double) NAN, 1.0, 1.0);
}

static void
other_text (void)
{
  SAME_TEXT ("air\nok 99 - no result", "gas");
}

static void
null_text (void)
{
  SAME_TEXT (NULL, "gas");
}

static void
other_int (void)
{
  SAME_INT (3, 4);
}

static void
leaves (void)
{
  NEED (strlen ("air") == 4);
  CHECK (strlen ("never reached") == 0);
}

static void
nothing (void)
{
}

static void
one_row (char *cells[])
{
  CHECK (cells[0][0] != '\0');
}

static void
no_file (void)
{
  test_each_row ("no-such-file.tsv", 2, one_row);
}

static const struct test_case cases[] = {
  { "good", good },
  { "condition", condition },
  { "far off", far_off },
  { "no number", no_number },
  { "other text", other_text },
  { "null text", null_text },
  { "other int", other_int },
  { "leaves", leaves },
  { "nothing", nothing },
  { "no file", no_file },
  { NULL, NULL }
};

static const struct test_case twice[] = {
  { "good", good },
  { "good", good },
  { NULL, NULL }
};

static const struct test_case none[] = { { NULL, NULL } };

int
main (int argc, char *argv[])
{
  if (argc == 2 && strcmp (argv[1], "--twice") == 0)
    return test_main (1, argv, twice);
  if (argc == 2 && strcmp (argv[1], "--none") == 0)
    return test_main (1, argv, none);
  return test_main (argc, argv, cases);
}
