/* Where answers and complaints go, and in which order.

   Answers are collected and written when there is enough of them, before anything goes to standard
   error, before the program waits for input, and at the end.  Everything is written by descriptor;
   no stdio stream is used beside.  Writing that failed is remembered: the run stops and says so. */
#ifndef SHELL_OUTPUT_H
#define SHELL_OUTPUT_H

#include <stdbool.h>
#include "report/report.h"
#include "support/outfile.h"
#include "support/check.h"
#include "support/text.h"

struct arena; struct fault; struct options; struct result;

struct output {
  enum report_format format;
  struct report_style style;            /* of answers */
  struct report_style fault_style;      /* of what goes to standard error */
  bool prompt;                          /* answers appear under what is typed */
  struct text pending;
  size_t whole;                         /* bytes of it that are whole answers */
  int fd;
  const char *name;                     /* for complaints */
  bool to_file;
  struct outfile file;
  bool headed;                          /* the heading row of CSV was written */
  int error;                            /* errno of what could not be written; 0 */
};

/* Opens the output the options ask for.  False with errno if its file cannot be opened.  */
bool output_open (struct output *, const struct options *, bool prompt) MUST_CHECK;

/* Writes what is pending.  False if that, or something before, could not be written.  */
bool output_flush (struct output *);

/* An answer; PAGED: it may be shown by a pager if it is longer than the screen.  */
void output_result (struct output *, const struct result *, bool paged);

/* A mistake: among the answers in JSON, else on standard error behind them.  */
void output_fault (struct output *, const struct fault *, const struct report_origin *);

/* A file that cannot be used, and why, as a mistake of no statement.  */
void output_file_fault (struct output *, const char *name, const char *why);

/* Plain text for the user, on standard error: "gaswright: SENTENCE".  */
void output_complain (const char *sentence);

/* Where the run cannot go on, for want of memory: writes the answers that are whole, or takes away
   the output file, whose old one stays.  Needs no memory.                                       */
void output_give_up (struct output *);

/* Flushes, puts an output file in its place (or, without KEEP, away) and gives everything back.
   False, having said so, if something could not be written.                                     */
bool output_finish (struct output *, bool keep);

#endif
