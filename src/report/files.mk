noinst_LIBRARIES += %D%/libreport.a

%C%_libreport_a_SOURCES = \
  %D%/canvas.c \
  %D%/canvas.h \
  %D%/card.c \
  %D%/chart.c \
  %D%/chart.h \
  %D%/chart_plan.c \
  %D%/chart_plan.h \
  %D%/check.c \
  %D%/csv.c \
  %D%/error.c \
  %D%/figure.c \
  %D%/fold.c \
  %D%/formula.c \
  %D%/formula.h \
  %D%/help.c \
  %D%/json.c \
  %D%/note.c \
  %D%/note.h \
  %D%/note_bars.c \
  %D%/note_bars.h \
  %D%/paper.h \
  %D%/paper_html.c \
  %D%/paper_markdown.c \
  %D%/remark.c \
  %D%/report.c \
  %D%/report.h \
  %D%/report_private.h \
  %D%/style.c \
  %D%/text.c \
  %D%/trend.c \
  %D%/verdict.c \
  %D%/workings.c \
  %D%/workings_machine.c
