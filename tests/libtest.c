#include "config.h"
#include "libtest.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <CUnit/CUnit.h>

enum { EXIT_FAILED = 1, EXIT_COULD_NOT_RUN = 99, ROW_COLUMNS = 64 };

/* CUnit calls its handlers without anything of ours, so what they need stands here.  */
static struct {
  unsigned int told;                    /* cases told of so far */
  unsigned int failed;
  unsigned int checks_before;           /* checks done before the case that runs */
  char about[400];
} run;

static int
could_not_run (const char *why)
{
  printf ("Bail out! %s\n", why);
  return EXIT_COULD_NOT_RUN;
}

/* Prints TEXT as remarks, so that no line of it can be taken for a result.  */
static void
print_remark (const char *text)
{
  fputs ("#   ", stdout);
  for (; *text != '\0'; text++) {
    putchar (*text);
    if (*text == '\n')
      fputs ("#   ", stdout);
  }
  putchar ('\n');
}

static void
case_starts (const CU_pTest test, const CU_pSuite suite)
{
  (void) test;
  (void) suite;
  run.checks_before = CU_get_number_of_asserts ();
  run.about[0] = '\0';
}

static void
case_ends (const CU_pTest test, const CU_pSuite suite, const CU_pFailureRecord failures)
{
  (void) suite;
  bool checked = CU_get_number_of_asserts () > run.checks_before;
  bool good = failures == NULL && checked;
  run.told++;
  run.failed += !good;
  printf ("%s %u - %s\n", good ? "ok" : "not ok", run.told, test->pName);
  for (CU_pFailureRecord one = failures; one != NULL; one = one->pNext)
    print_remark (one->strCondition);
  if (!checked)
    print_remark ("the case checks nothing");
}

/* Records a check with CUnit; DETAIL says what was seen.  */
static bool
record (bool holds, const char *detail, const char *file, int line)
{
  char text[4096];
  snprintf (text, sizeof text, "%s:%d: %s%s%s", file, line, detail,
            run.about[0] != '\0' ? "\nin " : "", run.about);
  CU_assertImplementation (holds, (unsigned int) line, text, file, "", CU_FALSE);
  return holds;
}

bool
test_check (bool holds, const char *condition, const char *file, int line)
{
  return record (holds, condition, file, line);
}

bool
test_near (double got, double want, double rel, const char *what, const char *file, int line)
{
  double allowed = want == 0 ? rel : rel * fabs (want);
  double off = want == 0 ? got : (got - want) / want;
  char detail[800];
  snprintf (detail, sizeof detail, "%.400s is %.17g, not %.17g (off by %.3g, allowed %.3g)", what,
            got, want, off, rel);
  return record (fabs (got - want) <= allowed, detail, file, line);
}

bool
test_same_text (const char *got, const char *want, const char *what, const char *file, int line)
{
  bool same = got == want || (got != NULL && want != NULL && strcmp (got, want) == 0);
  char detail[1200];
  snprintf (detail, sizeof detail, "%.200s is '%.450s', not '%.450s'", what,
            got != NULL ? got : "(null)", want != NULL ? want : "(null)");
  return record (same, detail, file, line);
}

bool
test_same_int (long long got, long long want, const char *what, const char *file, int line)
{
  char detail[600];
  snprintf (detail, sizeof detail, "%.400s is %lld, not %lld", what, got, want);
  return record (got == want, detail, file, line);
}

void
test_about (const char *format, ...)
{
  va_list arguments;
  va_start (arguments, format);
  vsnprintf (run.about, sizeof run.about, format, arguments);
  va_end (arguments);
}

/* Parts LINE at its tabs into at most MOST cells; returns how many there are.  */
static size_t
part_cells (char *line, char *cells[], size_t most)
{
  size_t count = 0;
  for (char *cell = line; cell != NULL; count++) {
    char *tab = strchr (cell, '\t');
    if (tab != NULL)
      *tab++ = '\0';
    if (count < most)
      cells[count] = cell;
    cell = tab;
  }
  return count;
}

size_t
test_each_row (const char *name, size_t columns, void (*each) (char *cells[]))
{
  const char *srcdir = getenv ("srcdir");
  char path[4096];
  snprintf (path, sizeof path, "%s/tests/%s", srcdir != NULL ? srcdir : ".", name);
  FILE *file = fopen (path, "r");
  test_about ("%s", path);
  if (!CHECK (file != NULL))
    return 0;
  char *cells[ROW_COLUMNS] = { NULL };
  char *line = NULL;
  size_t room = 0, rows = 0;
  bool heading = true;
  ssize_t length;
  for (int number = 1; (length = getline (&line, &room, file)) >= 0; number++) {
    line[strcspn (line, "\r\n")] = '\0';
    if (line[0] == '#' || line[0] == '\0')
      continue;
    test_about ("%s:%d", name, number);
    size_t found = part_cells (line, cells, ROW_COLUMNS);
    if (!SAME_INT (found, columns) || found > ROW_COLUMNS)
      break;
    if (!heading) {
      each (cells);
      rows++;
    }
    heading = false;
  }
  free (line);
  fclose (file);
  test_about ("%s", "");
  return rows;
}

static const struct test_case *
find_case (const struct test_case cases[], const char *name)
{
  for (const struct test_case *one = cases; one->name != NULL; one++)
    if (strcmp (one->name, name) == 0)
      return one;
  return NULL;
}

/* Adds a case; false, having said why, if CUnit would not take it as it is.  */
static bool
add_case (CU_pSuite suite, const struct test_case *one)
{
  CU_add_test (suite, one->name, one->run);
  if (CU_get_error () == CUE_SUCCESS)
    return true;
  printf ("# %s: %s\n", one->name, CU_get_error_msg ());
  return false;
}

/* Runs the cases named in ARGV, or all.  */
static int
run_suite (int argc, char *argv[], const struct test_case cases[])
{
  CU_pSuite suite = CU_add_suite (argv[0], NULL, NULL);
  if (suite == NULL)
    return could_not_run (CU_get_error_msg ());
  unsigned int planned = 0;
  for (int i = 1; i < argc; i++, planned++) {
    const struct test_case *one = find_case (cases, argv[i]);
    if (one == NULL || !add_case (suite, one))
      return could_not_run ("no such case; -l lists them");
  }
  if (argc < 2)
    for (const struct test_case *one = cases; one->name != NULL; one++, planned++)
      if (!add_case (suite, one))
        return could_not_run ("two cases of one name");
  printf ("1..%u\n", planned);
  CU_set_test_start_handler (case_starts);
  CU_set_test_complete_handler (case_ends);
  if (CU_run_all_tests () != CUE_SUCCESS)
    return could_not_run (CU_get_error_msg ());
  CU_print_run_results (stdout);
  putchar ('\n');
  if (planned == 0 || run.told != planned)
    return could_not_run ("fewer cases ran than were planned");
  return run.failed > 0 ? EXIT_FAILED : 0;
}

int
test_main (int argc, char *argv[], const struct test_case cases[])
{
  setvbuf (stdout, NULL, _IOLBF, 0);
  if (argc == 2 && strcmp (argv[1], "-l") == 0) {
    for (const struct test_case *one = cases; one->name != NULL; one++)
      puts (one->name);
    return 0;
  }
  if (CU_initialize_registry () != CUE_SUCCESS)
    return could_not_run (CU_get_error_msg ());
  int status = run_suite (argc, argv, cases);
  CU_cleanup_registry ();
  return status;
}
