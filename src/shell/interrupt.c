#include "config.h"
#include "shell/interrupt.h"

#include <errno.h>
#include <poll.h>
#include <signal.h>
#include <stddef.h>
#include <time.h>

/* Written by the handler: the signal that came, and whether a second one shall be the last.  */
static volatile sig_atomic_t caught;
static volatile sig_atomic_t second_ends;

static void
restore_and_raise (int number)
{
  sigset_t set;

  signal (number, SIG_DFL);
  sigemptyset (&set);
  sigaddset (&set, number);
  raise (number);
  sigprocmask (SIG_UNBLOCK, &set, NULL);
}

static void
note_signal (int number)
{
  if (caught != 0 && second_ends)
    restore_and_raise (number);
  caught = number;
}

/* Leaves alone what whoever started us wants ignored (nohup, a job in the background).  */
static void
catch_one (int number)
{
  struct sigaction before, action = { .sa_handler = note_signal };

  if (sigaction (number, NULL, &before) == 0 && before.sa_handler == SIG_IGN)
    return;
  sigemptyset (&action.sa_mask);
  sigaction (number, &action, NULL);            /* without SA_RESTART: waiting ends */
}

void
interrupt_catch (bool at_prompt)
{
  second_ends = !at_prompt;
  catch_one (SIGINT);
  if (!at_prompt) {
    catch_one (SIGTERM);
    catch_one (SIGHUP);
  }
}

bool
interrupt_pending (void)
{
  return caught != 0;
}

bool
interrupt_wait (int fd, short events)
{
  static const struct timespec at_once = { 0 };
  struct pollfd asked = { .fd = fd, .events = events };
  sigset_t held, before;
  int ready;

  sigemptyset (&held);
  sigaddset (&held, SIGINT);
  sigaddset (&held, SIGTERM);
  sigaddset (&held, SIGHUP);
  sigprocmask (SIG_BLOCK, &held, &before);
  do
    ready = ppoll (&asked, 1, caught == 0 ? NULL : &at_once, &before);
  while (ready == -1 && errno == EINTR);
  sigprocmask (SIG_SETMASK, &before, NULL);
  return ready != 0;
}

void
interrupt_forget (void)
{
  caught = 0;
}

void
interrupt_pass_on (void)
{
  if (caught != 0)
    restore_and_raise (caught);
}
