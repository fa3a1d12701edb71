# Suites of the layer report.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_report)

suites += %D%/t_canvas
%C%_t_canvas_SOURCES = %D%/t_canvas.c
%C%_t_canvas_LDADD = $(with_report)

suites += %D%/t_figure
%C%_t_figure_SOURCES = %D%/t_figure.c
%C%_t_figure_LDADD = $(with_report)

suites += %D%/t_formula
%C%_t_formula_SOURCES = %D%/t_formula.c
%C%_t_formula_LDADD = $(with_report)

suites += %D%/t_report
%C%_t_report_SOURCES = %D%/t_report.c
%C%_t_report_LDADD = $(with_report)

suites += %D%/t_chart
%C%_t_chart_SOURCES = %D%/t_chart.c
%C%_t_chart_LDADD = $(with_report)
