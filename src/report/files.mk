noinst_LIBRARIES += %D%/libreport.a

%C%_libreport_a_SOURCES = \
  %D%/report.c \
  %D%/report.h
