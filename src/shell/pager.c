#include "config.h"
#include "shell/pager.h"

#include <errno.h>
#include <signal.h>
#include <stdlib.h>
#include <sys/ioctl.h>
#include <sys/wait.h>
#include <termios.h>
#include <unistd.h>

#include "shell/descriptor.h"

enum { STATUS_NOT_FOUND = 127 };                /* of the shell: no such command */

struct screen
screen_size (int fd)
{
  struct winsize size;

  if (ioctl (fd, TIOCGWINSZ, &size) == -1 || size.ws_row == 0 || size.ws_col == 0)
    return (struct screen) { 24, 80 };
  return (struct screen) { size.ws_row, size.ws_col };
}

/* Becomes the pager, which reads from FD.  */
static void
become_pager (int fd)
{
  const char *pager = getenv ("PAGER");

  if (pager == NULL || *pager == '\0')
    pager = "less -FRX";
  signal (SIGINT, SIG_DFL);
  signal (SIGPIPE, SIG_DFL);
  if (dup2 (fd, STDIN_FILENO) != -1)
    execl ("/bin/sh", "sh", "-c", pager, (char *) NULL);
  _exit (STATUS_NOT_FOUND);
}

/* Its exit status, once it has ended.  */
static int
wait_for (pid_t child)
{
  int status;

  while (waitpid (child, &status, 0) == -1) {
    if (errno != EINTR)
      return 0;
  }
  return WIFEXITED (status) ? WEXITSTATUS (status) : 0;
}

bool
pager_show (const char *text, size_t n)
{
  struct sigaction pipe_before, stop_before, ignore = { .sa_handler = SIG_IGN };
  int ends[2], status = STATUS_NOT_FOUND;
  pid_t child;

  if (pipe (ends) == -1)
    return false;
  child = fork ();
  if (child == 0) {
    close (ends[1]);
    become_pager (ends[0]);
  }
  close (ends[0]);
  if (child == -1) {
    close (ends[1]);
    return false;
  }
  /* A pager may be left before it has read everything, and Ctrl-C in it is its own affair.  */
  sigaction (SIGPIPE, &ignore, &pipe_before);
  sigaction (SIGINT, &ignore, &stop_before);
  if (descriptor_write (ends[1], text, n) || errno == EPIPE)
    status = 0;
  close (ends[1]);
  const int ended = wait_for (child);
  sigaction (SIGPIPE, &pipe_before, NULL);
  sigaction (SIGINT, &stop_before, NULL);
  return status == 0 && ended != STATUS_NOT_FOUND;
}
