/* Types at a program through a pseudo-terminal and watches its screen.

       typist [-s ROWSxCOLUMNS] PROGRAM [ARGUMENT...] < STEPS

   Steps, a line each; TEXT may hold \e \n \r \t \\ and \xHH:

       type TEXT         sends it as if typed
       see TEXT          waits until the screen has shown it, behind what was seen before
       never TEXT        the screen has not shown it so far, behind what was seen before
       size ROWSxCOLUMNS changes the size of the terminal
       pause MS          lets that much time pass
       end STATUS        waits until the program ends, with that exit status

   Steering sequences, carriage returns and null bytes (padding for slow terminals) are left out of
   what is seen.  Prints what went wrong and the screen; the exit status is 0 if every step went
   well, 1 if not, 99 if it could not be tried.                                                  */
#include "config.h"

#include <errno.h>
#include <poll.h>
#include <pty.h>
#include <signal.h>
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/ioctl.h>
#include <sys/types.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

enum { STATUS_WRONG = 1, STATUS_NOT_TRIED = 99, PATIENCE_S = 20, SCREEN_MOST = 1 << 20,
       STEP_MOST = 8192 };

/* Where the bytes of a steering sequence are being skipped.  */
enum steering { STEER_NONE, STEER_ESCAPE, STEER_CSI, STEER_OSC };

struct play {
  int fd;
  pid_t program;
  char screen[SCREEN_MOST];
  size_t length, seen;                  /* shown so far; and how much of it was looked for */
  enum steering steering;
  bool closed;
};

static void
show_byte (struct play *play, char c)
{
  switch (play->steering) {
    case STEER_ESCAPE:
      play->steering = c == '[' ? STEER_CSI : c == ']' ? STEER_OSC : STEER_NONE;
      return;
    case STEER_CSI:
      if (c >= '@' && c <= '~')
        play->steering = STEER_NONE;
      return;
    case STEER_OSC:
      if (c == '\a')
        play->steering = STEER_NONE;
      return;
    case STEER_NONE:
      break;
  }
  if (c == '\033')
    play->steering = STEER_ESCAPE;
  else if (c != '\r' && c != '\0' && play->length + 1 < SCREEN_MOST)
    play->screen[play->length++] = c;
  play->screen[play->length] = '\0';
}

/* Takes in what is shown within WAIT_MS.  False if nothing was.  */
static bool
watch (struct play *play, int wait_ms)
{
  struct pollfd wait = { .fd = play->fd, .events = POLLIN };
  char bytes[4096];
  ssize_t n;

  if (play->closed || poll (&wait, 1, wait_ms) != 1)
    return false;
  n = read (play->fd, bytes, sizeof bytes);
  play->closed = n <= 0;                        /* EIO: the program has ended */
  for (ssize_t i = 0; i < n; i++)
    show_byte (play, bytes[i]);
  return n > 0;
}

/* Turns the escapes of TEXT into what they stand for, in place; returns the length.  */
static size_t
unescape (char *text)
{
  static const char from[] = "enrt\\", to[] = "\033\n\r\t\\";
  size_t n = 0;

  for (const char *c = text; *c != '\0'; c++) {
    const char *letter = *c == '\\' && c[1] != '\0' ? strchr (from, c[1]) : NULL;

    if (letter != NULL) {
      text[n++] = to[letter - from];
      c++;
    } else if (*c == '\\' && c[1] == 'x' && c[2] != '\0' && c[3] != '\0') {
      const char digits[] = { c[2], c[3], '\0' };

      text[n++] = (char) strtol (digits, NULL, 16);
      c += 3;
    } else {
      text[n++] = *c;
    }
  }
  text[n] = '\0';
  return n;
}

static bool
type (struct play *play, const char *text, size_t n)
{
  while (n > 0) {
    const ssize_t sent = write (play->fd, text, n);

    if (sent <= 0)
      return false;
    text += sent;
    n -= (size_t) sent;
    watch (play, 0);
  }
  return true;
}

static bool
see (struct play *play, const char *text)
{
  const time_t start = time (NULL);

  for (;;) {
    const char *found = strstr (play->screen + play->seen, text);

    if (found != NULL) {
      play->seen = (size_t) (found - play->screen) + strlen (text);
      return true;
    }
    if (play->closed || time (NULL) - start > PATIENCE_S)
      return false;
    watch (play, 100);
  }
}

static bool
never (struct play *play, const char *text)
{
  while (watch (play, 200))
    continue;
  return strstr (play->screen + play->seen, text) == NULL;
}

static bool
read_size (const char *text, struct winsize *size)
{
  unsigned rows, columns;

  if (sscanf (text, "%ux%u", &rows, &columns) != 2)
    return false;
  *size = (struct winsize) { .ws_row = (unsigned short) rows,
                             .ws_col = (unsigned short) columns };
  return true;
}

static bool
resize (const struct play *play, const char *text)
{
  struct winsize size;

  return read_size (text, &size) && ioctl (play->fd, TIOCSWINSZ, &size) == 0;
}

/* A status above 1000: ended by that signal.  */
static bool
end (struct play *play, const char *want)
{
  const time_t start = time (NULL);
  int status = 0, got;

  while (!play->closed && time (NULL) - start <= PATIENCE_S)
    watch (play, 100);
  if (!play->closed)
    return false;
  while (waitpid (play->program, &status, 0) == -1 && errno == EINTR)
    continue;
  play->program = 0;
  got = WIFEXITED (status) ? WEXITSTATUS (status) : 1000 + WTERMSIG (status);
  if (got != atoi (want))
    printf ("the exit status is %d\n", got);
  return got == atoi (want);
}

static bool
pause_for (const char *text)
{
  struct timespec left = { atol (text) / 1000, atol (text) % 1000 * 1000000L };
  while (nanosleep (&left, &left) != 0 && errno == EINTR) {
  }
  return true;
}

static bool
step (struct play *play, char *line)
{
  char *space = strchr (line, ' ');
  char *text = space != NULL ? space + 1 : line + strlen (line);
  const size_t verb = space != NULL ? (size_t) (space - line) : strlen (line);
  const size_t n = unescape (text);

  if (strncmp (line, "type", verb) == 0)
    return type (play, text, n);
  if (strncmp (line, "see", verb) == 0)
    return see (play, text);
  if (strncmp (line, "never", verb) == 0)
    return never (play, text);
  if (strncmp (line, "size", verb) == 0)
    return resize (play, text);
  if (strncmp (line, "pause", verb) == 0)
    return pause_for (text);
  if (strncmp (line, "end", verb) == 0)
    return end (play, text);
  printf ("no such step\n");
  return false;
}

static bool
play_all (struct play *play)
{
  char line[STEP_MOST], told[STEP_MOST];

  while (fgets (line, sizeof line, stdin) != NULL) {
    line[strcspn (line, "\n")] = '\0';
    if (line[0] == '\0')
      continue;
    strcpy (told, line);
    if (!step (play, line)) {
      printf ("failed: %s\nthe screen, up to what was seen:\n%.*s\nand behind it:\n%s\n", told,
              (int) play->seen, play->screen, play->screen + play->seen);
      return false;
    }
  }
  return true;
}

int
main (int argc, char *argv[])
{
  static struct play play;
  struct winsize size = { .ws_row = 24, .ws_col = 80 };
  bool good;
  int opt;

  while ((opt = getopt (argc, argv, "+s:")) == 's') {
    if (!read_size (optarg, &size))
      return STATUS_NOT_TRIED;
  }
  if (opt != -1 || optind == argc)
    return STATUS_NOT_TRIED;
  signal (SIGPIPE, SIG_IGN);
  play.program = forkpty (&play.fd, NULL, NULL, &size);
  if (play.program == -1) {
    perror ("forkpty");
    return STATUS_NOT_TRIED;
  }
  if (play.program == 0) {
    signal (SIGINT, SIG_DFL);                     /* ignored where the tests run behind a shell */
    execvp (argv[optind], argv + optind);
    _exit (STATUS_NOT_TRIED);
  }
  good = play_all (&play);
  if (play.program != 0) {
    kill (play.program, SIGKILL);
    waitpid (play.program, NULL, 0);
  }
  return good ? 0 : STATUS_WRONG;
}
