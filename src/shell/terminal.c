#include "config.h"
#include "shell/terminal.h"

#include <string.h>
#include <unistd.h>

#ifdef HAVE_READLINE
# include <errno.h>
# include <poll.h>
# include <signal.h>
# include <stdio.h>
# include <stdlib.h>
# include <readline/history.h>
# include <readline/readline.h>
# include "shell/history.h"
#else
# include "shell/source.h"
#endif

#include "shell/completion.h"
#include "shell/descriptor.h"
#include "shell/interrupt.h"
#include "shell/paste.h"
#include "support/arena.h"
#include "support/memory.h"
#include "support/text.h"

struct terminal {
  struct terminal_owner owner;
  int screen;                           /* descriptor prompts go to */
  struct text typed;                    /* what was typed or pasted last */
  size_t next;                          /* offset of the first line of it not read yet */
  bool any_left;
  bool ended, interrupted, pasted;
  size_t left_out;
#ifdef HAVE_READLINE
  struct text history;                  /* the file; empty: none */
  struct arena *arena;                  /* of the last completion */
  struct completion found;
  size_t offered;                       /* of what was found */
  int asked_since_interrupt;
#else
  struct source source;
#endif
};

#ifdef HAVE_READLINE

/* The library calls its functions without anything of ours.  */
static struct terminal *current;

/* What a read gives while the line is being given up.  '\n' ends an ordinary line; where the
   library asks again, because it waits for the end of a paste, the next two get it out of there.
   A question of completion must be broken off at once: the library has already given back what it
   lists.                                                                                        */
static int
key_of_interrupt (void)
{
  if (RL_ISSTATE (RL_STATE_COMPLETING)) {
    rl_readline_state &= ~(unsigned long) RL_STATE_COMPLETING;
    return '\a';
  }
  switch (current->asked_since_interrupt++) {
    case 0:
      rl_replace_line ("", 0);
      rl_done = 1;
      return '\n';
    case 1:
      return '\a';
    default:
      return EOF;
  }
}

/* Waits for a key or a signal; SIGINT cannot slip in between looking and waiting.  */
static bool
wait_for_key (int fd)
{
  struct pollfd wait = { .fd = fd, .events = POLLIN };
  sigset_t stop, before;
  int ready = -1;

  sigemptyset (&stop);
  sigaddset (&stop, SIGINT);
  sigprocmask (SIG_BLOCK, &stop, &before);
  if (!interrupt_pending () && !rl_pending_signal ())
    ready = ppoll (&wait, 1, NULL, &before);
  sigprocmask (SIG_SETMASK, &before, NULL);
  rl_check_signals ();
  return ready > 0;
}

static int
get_key (FILE *stream)
{
  const int fd = fileno (stream);
  unsigned char key;

  for (;;) {
    const bool ready = wait_for_key (fd);

    if (interrupt_pending ())
      return key_of_interrupt ();
    if (!ready)
      continue;
    const ssize_t n = read (fd, &key, 1);
    if (n == 1)
      return key;
    if (n == 0 || errno != EINTR)
      return EOF;
  }
}

static char *
next_offer (const char *text, int state)
{
  (void) text;
  if (state == 0)
    current->offered = 0;
  return current->offered < current->found.count
           ? strdup (current->found.words[current->offered++]) : NULL;
}

/* File names stand in quotes: offers one where none is open yet.  */
static char **
complete_file (const char *text)
{
  char **names = rl_completion_matches (text, rl_filename_completion_function);

  if (rl_completion_quote_character != '\0' || names == NULL)
    return names;
  for (size_t i = 0; names[i] != NULL; i++) {
    const size_t n = strlen (names[i]);
    char *quoted = malloc (n + 2);

    if (quoted == NULL)
      break;
    quoted[0] = '"';
    memcpy (quoted + 1, names[i], n + 1);
    free (names[i]);
    names[i] = quoted;
  }
  rl_completion_suppress_append = 1;
  return names;
}

static char **
complete (const char *text, int start, int end)
{
  rl_attempted_completion_over = 1;             /* nothing else fits where ours does not */
  arena_reset (current->arena);
  current->found = (struct completion) { .arena = current->arena };
  current->owner.complete (current->owner.with, rl_line_buffer, (size_t) start, (size_t) end,
                           &current->found);
  if (current->found.is_file)
    return complete_file (text);
  return current->found.count > 0 ? rl_completion_matches (text, next_offer) : NULL;
}

/* Prints a page of help below the line and shows the line again as it was.  */
static int
show_help (int count, int key)
{
  const int point = rl_point;
  struct text page;

  (void) count;
  (void) key;
  text_init (&page);
  if (current->owner.help (current->owner.with, rl_line_buffer, (size_t) rl_point, &page)) {
    rl_point = rl_end;
    rl_redisplay ();
    rl_crlf ();
    fwrite (page.bytes, 1, page.length, rl_outstream);
    rl_crlf ();
    rl_point = point;
    rl_on_new_line ();
    rl_forced_update_display ();
  } else {
    rl_ding ();
  }
  text_clear (&page);
  return 0;
}

static void
bind_keys (void)
{
  /* F1 as terminals send it; the last is that of the console of the system itself.  */
  static const char *const sequences[] = { "\\eOP", "\\e[11~", "\\e[[A" };
  const char *own = rl_get_termcap ("k1");

  for (size_t i = 0; i < sizeof sequences / sizeof sequences[0]; i++)
    rl_bind_keyseq_if_unbound (sequences[i], show_help);
  if (own != NULL && *own != '\0')
    rl_bind_keyseq_if_unbound (own, show_help);
}

static void
open_history (struct terminal *terminal)
{
  using_history ();
  history_comment_char = '#';
  history_write_timestamps = 1;
  stifle_history (HISTORY_MOST);
  if (history_file (&terminal->history))
    read_history (terminal->history.bytes);
  else
    text_clear (&terminal->history);
}

static void
open_editing (struct terminal *terminal)
{
  static char name[] = "gaswright", breaks[] = " \t\n,;=";

  current = terminal;
  terminal->arena = arena_create ();
  rl_readline_name = name;
  rl_add_defun ("gaswright-help", show_help, -1);
  rl_outstream = terminal->screen == STDERR_FILENO ? stderr : stdout;
  rl_getc_function = get_key;
  rl_attempted_completion_function = complete;
  rl_completer_word_break_characters = breaks;
  rl_completer_quote_characters = "\"";
  rl_initialize ();
  bind_keys ();
  open_history (terminal);
}

static void
close_editing (struct terminal *terminal)
{
  if (terminal->history.length > 0)
    history_truncate_file (terminal->history.bytes, HISTORY_MOST);
  text_clear (&terminal->history);
  clear_history ();
  arena_destroy (terminal->arena);
  current = NULL;
}

/* Asks for what is typed next.  False at the end of input or an interrupt.  */
static bool
ask (struct terminal *terminal, const char *prompt)
{
  char *line;

  terminal->asked_since_interrupt = 0;
  line = readline (prompt);
  text_empty (&terminal->typed);
  if (line != NULL)
    text_add (&terminal->typed, line);
  free (line);
  return line != NULL;
}

static void
remember (struct terminal *terminal)
{
  const char *typed = terminal->typed.bytes;
  const HIST_ENTRY *last = history_length > 0 ? history_get (history_base + history_length - 1)
                                              : NULL;

  if (!history_keeps (typed, last != NULL ? last->line : NULL))
    return;
  add_history (typed);
  if (terminal->history.length > 0)
    append_history (1, terminal->history.bytes);
}

bool
terminal_has_keys (void)
{
  return true;
}

#else /* no readline */

static void
open_editing (struct terminal *terminal)
{
  if (!source_open (&terminal->source, "-", NULL))
    terminal->ended = true;
}

static void
close_editing (struct terminal *terminal)
{
  source_close (&terminal->source);
}

static bool
ask (struct terminal *terminal, const char *prompt)
{
  const struct reader lines = source_reader (&terminal->source);
  bool read;

  if (!descriptor_write (terminal->screen, prompt, strlen (prompt)))
    return false;
  text_empty (&terminal->typed);
  read = lines.fetch (lines.source, false, &terminal->typed);
  terminal->source.ended = false;               /* an interrupt is not the end */
  return read;
}

static void
remember (struct terminal *terminal)
{
  (void) terminal;
}

bool
terminal_has_keys (void)
{
  return false;
}

#endif

struct terminal *
terminal_open (const struct terminal_owner *owner, bool to_error)
{
  struct terminal *terminal = memory_get (1, sizeof *terminal);

  terminal->owner = *owner;
  terminal->screen = to_error ? STDERR_FILENO : STDOUT_FILENO;
  open_editing (terminal);
  return terminal;
}

void
terminal_close (struct terminal *terminal)
{
  close_editing (terminal);
  text_clear (&terminal->typed);
  memory_release (terminal);
}

/* Puts the next line of what was typed into LINE.  */
static void
take_line (struct terminal *terminal, struct text *line)
{
  const char *start = terminal->typed.bytes + terminal->next;
  const char *end = terminal->typed.length > 0 ? strchr (start, '\n') : NULL;

  if (end != NULL) {
    text_add_bytes (line, start, (size_t) (end - start));
    terminal->next += (size_t) (end - start) + 1;
  } else if (terminal->typed.length > 0) {
    text_add (line, start);
  }
  terminal->any_left = end != NULL && end[1] != '\0';
}

static bool
fetch (void *from, bool continues, struct text *line)
{
  struct terminal *terminal = from;
  size_t left_out;

  if (terminal->any_left) {
    take_line (terminal, line);
    return true;
  }
  if (terminal->ended)
    return false;
  if (!ask (terminal, terminal->owner.prompt (terminal->owner.with, continues))
      || interrupt_pending ()) {
    terminal->interrupted = interrupt_pending ();
    terminal->ended = !terminal->interrupted;
    interrupt_forget ();
    if ((terminal->ended || !terminal_has_keys ())
        && !descriptor_write (terminal->screen, "\n", 1))
      terminal->ended = true;
    return false;
  }
  const bool changed = paste_clean (&terminal->typed, &left_out);
  terminal->left_out += left_out;
  terminal->pasted = changed || (terminal->typed.length > 0
                                 && strchr (terminal->typed.bytes, '\n') != NULL);
  if (terminal->typed.length > 0)
    remember (terminal);
  terminal->next = 0;
  take_line (terminal, line);
  return true;
}

struct reader
terminal_reader (struct terminal *terminal)
{
  return (struct reader) { "prompt", fetch, terminal, 0 };
}

bool
terminal_was_interrupted (struct terminal *terminal)
{
  const bool interrupted = terminal->interrupted;

  terminal->interrupted = false;
  return interrupted;
}

bool
terminal_was_pasted (const struct terminal *terminal)
{
  return terminal->pasted;
}

size_t
terminal_left_out (struct terminal *terminal)
{
  const size_t left_out = terminal->left_out;

  terminal->left_out = 0;
  return left_out;
}

void
terminal_drop_pasted (struct terminal *terminal)
{
  terminal->any_left = false;
}
