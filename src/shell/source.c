#include "config.h"
#include "shell/source.h"

#include <errno.h>
#include <fcntl.h>
#include <poll.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "shell/interrupt.h"
#include "shell/output.h"
#include "support/memory.h"
#include "support/text.h"

enum { BLOCK = 64 * 1024 };                     /* bytes read at once */

bool
source_open (struct source *source, const char *name, struct output *output)
{
  struct stat about;
  const bool standard = strcmp (name, "-") == 0;

  *source = (struct source) { .name = name, .output = output };
  /* A pipe that nobody writes to yet is waited for where it is read: signals are let in there.  */
  source->fd = standard ? STDIN_FILENO : open (name, O_RDONLY | O_CLOEXEC | O_NONBLOCK);
  if (source->fd == -1 || (!standard && fcntl (source->fd, F_SETFL, 0) == -1))
    return false;
  source->may_wait = fstat (source->fd, &about) != 0 || !S_ISREG (about.st_mode);
  source->block = memory_get (BLOCK, 1);
  return true;
}

void
source_close (struct source *source)
{
  if (source->fd > STDIN_FILENO)
    close (source->fd);
  memory_release (source->block);
  source->block = NULL;
}

/* After a read that gave nothing: may it be tried again?  */
static bool
may_try_again (const struct source *source)
{
  if (errno == EINTR)
    return !interrupt_pending ();
  return errno == EAGAIN && interrupt_wait (source->fd, POLLIN) && !interrupt_pending ();
}

/* Reads the next block.  False at the end.  */
static bool
fill (struct source *source)
{
  ssize_t n;

  if (source->ended)
    return false;
  if (source->may_wait && source->output != NULL)
    output_flush (source->output);
  if (source->may_wait && (!interrupt_wait (source->fd, POLLIN) || interrupt_pending ())) {
    source->ended = true;
    source->next = source->end = 0;
    return false;
  }
  do
    n = read (source->fd, source->block, BLOCK);
  while (n == -1 && may_try_again (source));
  if (n == -1 && errno != EINTR)
    source->error = errno;
  source->ended = n <= 0;
  source->next = 0;
  source->end = n > 0 ? (size_t) n : 0;
  return n > 0;
}

static bool
fetch (void *from, bool continues, struct text *line)
{
  struct source *source = from;
  bool any = false;

  (void) continues;
  for (;;) {
    const size_t left = source->end - source->next;
    const char *start = source->block + source->next;
    const char *end = left > 0 ? memchr (start, '\n', left) : NULL;

    if (end != NULL) {
      text_add_bytes (line, start, (size_t) (end - start));
      source->next += (size_t) (end - start) + 1;
      return true;
    }
    if (left > 0) {
      text_add_bytes (line, start, left);
      source->next = source->end;
      any = true;
    }
    if (!fill (source))
      return any;
  }
}

struct reader
source_reader (struct source *source)
{
  return (struct reader) { source->name, fetch, source, 0 };
}
