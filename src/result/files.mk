noinst_LIBRARIES += %D%/libresult.a

%C%_libresult_a_SOURCES = \
  %D%/result.c \
  %D%/result.h
