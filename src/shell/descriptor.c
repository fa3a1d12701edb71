#include "config.h"
#include "shell/descriptor.h"

#include <errno.h>
#include <fcntl.h>
#include <poll.h>
#include <string.h>
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

/* After a write that moved nothing: may it be tried again?  */
static bool
may_try_again (int fd)
{
  if (errno == EINTR)
    return !interrupt_pending ();
  if (errno == EAGAIN) {
    struct pollfd wait = { .fd = fd, .events = POLLOUT };
    return poll (&wait, 1, -1) == 1 || (errno == EINTR && !interrupt_pending ());
  }
  return false;
}

bool
descriptor_write (int fd, const char *bytes, size_t n)
{
  while (n > 0) {
    ssize_t written = write (fd, bytes, n);

    if (written > 0) {
      bytes += written;
      n -= (size_t) written;
    } else if (written == 0 || !may_try_again (fd)) {
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
