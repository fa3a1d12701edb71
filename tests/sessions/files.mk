# Whole sessions through the program, read back by scripts in Python that speak TAP themselves.
EXTRA_DIST += %D%/session.py %D%/session.sh %D%/scenarios %D%/weights2001 $(session_tests:.sh=.py) $(session_tests)
TESTS += $(session_tests)
session_tests = \
  %D%/figures.sh \
  %D%/refused.sh \
  %D%/scenarios.sh
