/* Runs a command several times and tells how long it took and how much memory it had:

       measure TIMES INPUT COMMAND [ARGUMENT...]

   INPUT is written into a pipe that is the command's standard input; its output goes nowhere.
   Prints one line: least and median wall time in ms, most resident memory in kB.  Exit status 1
   if the command could not be run or did not end with 0.                                        */
#include "config.h"

#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

enum { MOST_TIMES = 1000 };

struct cost { double ms; long kB; };

static double
now_ms (void)
{
  struct timespec t;
  clock_gettime (CLOCK_MONOTONIC, &t);
  return (double) t.tv_sec * 1e3 + (double) t.tv_nsec * 1e-6;
}

/* The command's side of the pipe; does not come back.  */
static void
become (int input, char *command[])
{
  int nowhere = open ("/dev/null", O_WRONLY);
  if (nowhere < 0 || dup2 (input, STDIN_FILENO) < 0 || dup2 (nowhere, STDOUT_FILENO) < 0)
    _exit (127);
  close (input);
  execv (command[0], command);
  _exit (127);
}

/* Writes the file INPUT into the pipe and closes it.  */
static void
feed (int pipe_end, int input)
{
  char bytes[65536];
  ssize_t got;
  while ((got = read (input, bytes, sizeof bytes)) > 0)
    for (ssize_t done = 0; done < got;) {
      ssize_t put = write (pipe_end, bytes + done, (size_t) (got - done));
      if (put <= 0)
        break;
      done += put;
    }
  close (pipe_end);
}

static int
run_once (const char *input_name, char *command[], struct cost *cost)
{
  int ends[2];
  int input = open (input_name, O_RDONLY | O_CLOEXEC);
  if (input < 0 || pipe2 (ends, O_CLOEXEC) != 0) {
    fprintf (stderr, "%s: %s\n", input_name, strerror (errno));
    return 1;
  }
  double begin = now_ms ();
  pid_t child = fork ();
  if (child == 0)
    become (ends[0], command);
  close (ends[0]);
  feed (ends[1], input);
  close (input);
  int status;
  struct rusage used;
  if (child < 0 || wait4 (child, &status, 0, &used) != child)
    return 1;
  *cost = (struct cost) { now_ms () - begin, used.ru_maxrss };
  if (!WIFEXITED (status) || WEXITSTATUS (status) != 0) {
    fprintf (stderr, "%s did not end well\n", command[0]);
    return 1;
  }
  return 0;
}

static int
compare_times (const void *a, const void *b)
{
  double x = ((const struct cost *) a)->ms, y = ((const struct cost *) b)->ms;
  return (x > y) - (x < y);
}

int
main (int argc, char *argv[])
{
  static struct cost costs[MOST_TIMES];
  int times = argc > 3 ? atoi (argv[1]) : 0;
  if (times < 1 || times > MOST_TIMES) {
    fputs ("use: measure TIMES INPUT COMMAND [ARGUMENT...]\n", stderr);
    return 2;
  }
  signal (SIGPIPE, SIG_IGN);
  long most_kB = 0;
  for (int i = 0; i < times; i++) {
    if (run_once (argv[2], argv + 3, &costs[i]) != 0)
      return 1;
    if (costs[i].kB > most_kB)
      most_kB = costs[i].kB;
  }
  qsort (costs, (size_t) times, sizeof costs[0], compare_times);
  printf ("%.3f %.3f %ld\n", costs[0].ms, costs[times / 2].ms, most_kB);
  return 0;
}
