#include "config.h"
#include "report/report.h"

#include "report/report_private.h"

void
report_result (struct text *out, enum report_format format, const struct report_style *style,
               const struct result *result, bool first)
{
  switch (format) {
    case REPORT_JSON:
      report_json (out, result);
      break;
    case REPORT_CSV:
      report_csv (out, result, first);
      break;
    case REPORT_TEXT:
    case REPORT_FORMATS:
      report_text (out, style, result);
      break;
  }
}

void
report_fault (struct text *out, enum report_format format, const struct report_style *style,
              const struct fault *fault, const struct report_origin *origin)
{
  if (format == REPORT_JSON)
    report_fault_json (out, fault, origin);
  else
    report_fault_text (out, style, fault, origin);      /* CSV has no rows for what failed */
}
