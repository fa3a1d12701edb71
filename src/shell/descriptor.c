#include "config.h"
#include "shell/descriptor.h"

#include <errno.h>
#include <fcntl.h>
#include <limits.h>
#include <poll.h>
#include <string.h>
#include <sys/stat.h>
#include <sys/types.h>
#include <unistd.h>

#include "shell/interrupt.h"

void
descriptor_fill_standard (void)
{
  for (int fd = STDIN_FILENO; fd <= STDERR_FILENO; fd++) {
    if (fcntl (fd, F_GETFD) == -1 && errno == EBADF) {
      /* The lowest free number is this one.  What is to be written to cannot be, so that answers
         are never thought to have arrived.                                                      */
      int opened = open ("/dev/null", O_RDONLY);
      if (opened > STDERR_FILENO)
        close (opened);
    }
  }
}

/* How many of N bytes FD takes without waiting in the write itself, where a signal that came just
   before would be waited past: all, or once a pipe has room, as many as surely fit.  None: a
   signal has come first.                                                                       */
static size_t
taken_at_once (int fd, bool may_wait, size_t n)
{
  if (!may_wait)
    return n;
  if (!interrupt_wait (fd, POLLOUT))
    return 0;
  return n < PIPE_BUF ? n : PIPE_BUF;
}

bool
descriptor_write (int fd, const char *bytes, size_t n)
{
  struct stat about;
  const bool may_wait = fstat (fd, &about) == 0 && !S_ISREG (about.st_mode);

  while (n > 0) {
    const size_t part = taken_at_once (fd, may_wait, n);
    ssize_t written;

    if (part == 0) {
      errno = EINTR;
      return false;
    }
    written = write (fd, bytes, part);
    if (written > 0) {
      bytes += written;
      n -= (size_t) written;
    } else if (written == 0 || (errno != EAGAIN && (errno != EINTR || interrupt_pending ()))) {
      return false;
    }
  }
  return true;
}

const char *
descriptor_reason (int error)
{
  switch (error) {
    case ENOENT:
      return "there is no such file";
    case ENOTDIR:
      return "part of its path is no folder";
    case EACCES:
    case EPERM:
      return "access is not allowed";
    case EISDIR:
      return "it is a folder";
    case ENOSPC:
      return "no space is left on the device";
    case EROFS:
      return "it may only be read";
    case EBADF:
      return "it is closed";
    default:
      return strerror (error);
  }
}
