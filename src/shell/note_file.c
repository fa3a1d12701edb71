#include "config.h"
#include "shell/note_file.h"

#include <errno.h>
#include <inttypes.h>
#include <stddef.h>
#include <stdlib.h>
#include <time.h>

#include "report/chart.h"
#include "report/note.h"
#include "result/chart.h"
#include "result/note.h"
#include "result/result.h"
#include "shell/descriptor.h"
#include "support/fault.h"
#include "support/outfile.h"
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
is_input (const char *name, const struct note_row *read, const struct note_inputs *inputs)
{
  for (size_t i = 0; i < inputs->count; i++)
    if (outfile_is_input (name, inputs->files[i]))
      return true;
  for (const struct note_row *r = read; r != NULL; r = r->next)
    if (outfile_is_input (name, r->text))
      return true;
  return inputs->running != NULL && outfile_is_input (name, inputs->running);
}

static bool
write_file (const char *name, const struct text *text, struct fault *fault)
{
  struct outfile file;
  if (!outfile_open (&file, name))
    return fault_set (fault, MESSAGE_FILE, name, descriptor_reason (errno));
  if (!descriptor_write (file.fd, text->bytes, text->length)) {
    const int error = errno;
    outfile_drop (&file);
    return fault_set (fault, MESSAGE_FILE, name, descriptor_reason (error));
  }
  if (!outfile_keep (&file))
    return fault_set (fault, MESSAGE_FILE, name, descriptor_reason (errno));
  return true;
}

static bool
write_one (const struct note *note, struct fault *fault)
{
  char date[32];
  struct text text;
  date_write (date);
  const struct note_about about = { date, PACKAGE_STRING };
  text_init (&text);
  note_write (&text, note_form_of (note->file), note, &about);
  const bool good = write_file (note->file, &text, fault);
  text_clear (&text);
  return good;
}

static bool
write_picture (const struct picture *picture, struct fault *fault)
{
  struct text text;
  text_init (&text);
  chart_write (&text, picture->chart);
  const bool good = write_file (picture->file, &text, fault);
  text_clear (&text);
  return good;
}

bool
note_file_write (struct result *result, const struct note_inputs *inputs, struct fault *fault)
{
  for (const struct note *note = result->note; note != NULL; note = note->next) {
    if (is_input (note->file, note->inputs, inputs))
      return fault_set (fault, MESSAGE_FILE_INPUT, note->file, NULL);
    if (!write_one (note, fault))
      return false;
    result_remark (result, MESSAGE_NOTE_WRITTEN, note->file, NULL);
  }
  for (const struct picture *p = result->picture; p != NULL; p = p->next) {
    if (is_input (p->file, p->inputs, inputs))
      return fault_set (fault, MESSAGE_FILE_INPUT, p->file, NULL);
    if (!write_picture (p, fault))
      return false;
    result_remark (result, MESSAGE_NOTE_PICTURE_WRITTEN, p->file, NULL);
  }
  return true;
}
