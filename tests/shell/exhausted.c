/* Memory that runs out: loaded before the C library (LD_PRELOAD), it fails each request for memory
   from the one numbered $FAIL_FROM on, or just the one numbered $FAIL_AT.  At the end it writes the
   number of requests to the file $FAIL_COUNT.                                                   */
#include <errno.h>
#include <stdio.h>
#include <stdlib.h>

/* The C library's own, by the names it keeps for those who stand before it.  */
extern void *__libc_malloc (size_t);
extern void *__libc_calloc (size_t, size_t);
extern void *__libc_realloc (void *, size_t);

static unsigned long asked, from, at;
static int ready;

static unsigned long
number (const char *name)
{
  const char *text = getenv (name);
  unsigned long value = 0;
  for (; text != NULL && *text >= '0' && *text <= '9'; text++)
    value = 10 * value + (unsigned long) (*text - '0');
  return value;
}

static int
fails (void)
{
  if (!ready) {
    ready = 1;
    from = number ("FAIL_FROM");
    at = number ("FAIL_AT");
  }
  asked++;
  if ((from > 0 && asked >= from) || asked == at) {
    errno = ENOMEM;
    return 1;
  }
  return 0;
}

void *
malloc (size_t n)
{
  return fails () ? NULL : __libc_malloc (n);
}

void *
calloc (size_t count, size_t n)
{
  return fails () ? NULL : __libc_calloc (count, n);
}

void *
realloc (void *old, size_t n)
{
  return fails () ? NULL : __libc_realloc (old, n);
}

static __attribute__ ((destructor)) void
tell (void)
{
  const char *name = getenv ("FAIL_COUNT");
  FILE *file = name != NULL ? fopen (name, "w") : NULL;
  if (file != NULL) {
    fprintf (file, "%lu\n", asked);
    fclose (file);
  }
}
