# Whole sessions through the program, read back by scripts in Python that speak TAP themselves.
EXTRA_DIST += \
  %D%/bad \
  %D%/balance_cases \
  %D%/contract.gw \
  %D%/metered.py \
  %D%/quarrels.tsv \
  %D%/scenarios \
  %D%/session.py \
  %D%/session.sh \
  %D%/weights2001 \
  $(session_tests) \
  $(session_tests:.sh=.py)
TESTS += $(session_tests)
session_tests = \
  %D%/air.sh \
  %D%/bad.sh \
  %D%/balance_forms.sh \
  %D%/balances.sh \
  %D%/claims.sh \
  %D%/clashes.sh \
  %D%/contract.sh \
  %D%/energy.sh \
  %D%/figures.sh \
  %D%/files.sh \
  %D%/networks.sh \
  %D%/notes.sh \
  %D%/pictures.sh \
  %D%/quarrels.sh \
  %D%/refused.sh \
  %D%/roundtrips.sh \
  %D%/rows.sh \
  %D%/scenarios.sh \
  %D%/sheets.sh \
  %D%/stated.sh \
  %D%/treatments.sh \
  %D%/trims.sh \
  %D%/uncertainty.sh \
  %D%/widths.sh \
  %D%/workings.sh
