# Hand-made results and faults in every form, held against the files in golden/.
check_PROGRAMS += %D%/render
%C%_render_SOURCES = %D%/render.c
%C%_render_LDADD = $(upto_report) $(GSL_LIBS)

EXTRA_DIST += %D%/golden %D%/machine.py %D%/renderings.sh
TESTS += %D%/renderings.sh
