#include "config.h"
#include "shell/note_file.h"

#include <errno.h>
#include <inttypes.h>
#include <stddef.h>
#include <stdlib.h>
#include <time.h>

#include "report/note.h"
#include "result/note.h"
#include "result/result.h"
#include "shell/descriptor.h"
#include "shell/outfile.h"
#include "support/fault.h"
#include "support/text.h"

/* Today, or the day SOURCE_DATE_EPOCH says (reproducible-builds.org, specification 1.1).  */
static void
date_write (char date[32])
{
  const char *epoch = getenv ("SOURCE_DATE_EPOCH");
  const bool told = epoch != NULL && *epoch != '\0';
  const time_t when = told ? (time_t) strtoll (epoch, NULL, 10) : time (NULL);
  struct tm day;
  date[0] = '\0';
  if ((told ? gmtime_r (&when, &day) : localtime_r (&when, &day)) == NULL
      || strftime (date, 32, "%Y-%m-%d", &day) == 0)
    date[0] = '\0';
}

static bool
is_input (const struct note *note, const struct note_inputs *inputs)
{
  for (size_t i = 0; i < inputs->count; i++)
    if (outfile_is_input (note->file, inputs->files[i]))
      return true;
  for (const struct note_row *r = note->inputs; r != NULL; r = r->next)
    if (outfile_is_input (note->file, r->text))
      return true;
  return inputs->running != NULL && outfile_is_input (note->file, inputs->running);
}

static bool
write_one (const struct note *note, struct fault *fault)
{
  char date[32];
  struct outfile file;
  struct text text;
  date_write (date);
  const struct note_about about = { date, PACKAGE_STRING };
  if (!outfile_open (&file, note->file))
    return fault_set (fault, MESSAGE_FILE, note->file, descriptor_reason (errno));
  text_init (&text);
  note_write (&text, note_form_of (note->file), note, &about);
  bool good = descriptor_write (file.fd, text.bytes, text.length);
  text_clear (&text);
  if (!good) {
    const int error = errno;
    outfile_drop (&file);
    return fault_set (fault, MESSAGE_FILE, note->file, descriptor_reason (error));
  }
  if (!outfile_keep (&file))
    return fault_set (fault, MESSAGE_FILE, note->file, descriptor_reason (errno));
  return true;
}

bool
note_file_write (struct result *result, const struct note_inputs *inputs, struct fault *fault)
{
  for (const struct note *note = result->note; note != NULL; note = note->next) {
    if (is_input (note, inputs))
      return fault_set (fault, MESSAGE_FILE_INPUT, note->file, NULL);
    if (!write_one (note, fault))
      return false;
    result_remark (result, MESSAGE_NOTE_WRITTEN, note->file, NULL);
  }
  return true;
}
