/* Runs one suite of tests and tells how it went as TAP.

   A suite is a program with a table of named cases:

       static const struct test_case cases[] = {
         { "a dry gas stays dry", stays_dry },
         { NULL, NULL }
       };

       int
       main (int argc, char *argv[])
       {
         return test_main (argc, argv, cases);
       }

   SUITE -l lists the cases, SUITE CASE... runs those only.  The exit status is 0, 1 (a case failed)
   or 99 (the suite could not run).  A case that checks nothing has failed.  Every check prints
   what it saw when it fails and gives back whether it held; a case goes on after it.            */
#ifndef LIBTEST_H
#define LIBTEST_H

#include <stdbool.h>
#include <stddef.h>

struct test_case { const char *name; void (*run) (void); };

/* CASES end with a null name.  */
int test_main (int argc, char *argv[], const struct test_case cases[]);

/* Labels what the checks that follow are about (a row of a table, the seed of a random case): it is
   printed when one of them fails.  It lasts until the next label or the end of the case.        */
void test_about (const char *format, ...) __attribute__ ((format (printf, 1, 2)));

/* Calls EACH for every row of the tab-separated file NAME below tests/ ("numbers/x.tsv"), without
   remarks ('#'), empty lines and the first row, which names the columns; labels the checks with
   file and line.  A row that has not COLUMNS cells fails the case.  Returns how many rows.       */
size_t test_each_row (const char *name, size_t columns, void (*each) (char *cells[]));

/* Holds CONDITION?  */
#define CHECK(condition) test_check ((condition), #condition, __FILE__, __LINE__)

/* The same; leaves the case if it does not hold, for what the rest cannot do without.  */
#define NEED(condition)                                                                 \
  do {                                                                                  \
    if (!test_check ((condition), #condition, __FILE__, __LINE__))                      \
      return;                                                                           \
  } while (0)

/* Is GOT within REL times WANT of WANT?  WANT 0: within REL of it.  Never for nan.  */
#define NEAR(got, want, rel) test_near ((got), (want), (rel), #got, __FILE__, __LINE__)

/* Are the texts the same?  Null is the same as null only.  */
#define SAME_TEXT(got, want) test_same_text ((got), (want), #got, __FILE__, __LINE__)

/* Are the whole numbers, or values of an enum, the same?  */
#define SAME_INT(got, want) \
  test_same_int ((long long) (got), (long long) (want), #got, __FILE__, __LINE__)

bool test_check (bool holds, const char *condition, const char *file, int line);
bool test_near (double got, double want, double rel, const char *what, const char *file, int line);
bool test_same_text (const char *got, const char *want, const char *what, const char *file,
                     int line);
bool test_same_int (long long got, long long want, const char *what, const char *file, int line);

#endif
