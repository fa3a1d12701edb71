noinst_LIBRARIES += %D%/libresult.a

%C%_libresult_a_SOURCES = \
  %D%/balance_verdict.h \
  %D%/chart.h \
  %D%/check_verdict.h \
  %D%/note.h \
  %D%/result.c \
  %D%/result.h \
  %D%/trend.h \
  %D%/workings_record.h
