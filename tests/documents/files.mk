# Documents: help, manual pages, README and demo show what the program does.
EXTRA_DIST += \
  %D%/demo_balances.py \
  %D%/examples.sh \
  %D%/header.golden \
  %D%/morning.golden \
  %D%/morning.py \
  %D%/preamble.gw \
  %D%/quarrels.golden \
  %D%/renew.sh \
  %D%/replay.awk \
  %D%/upgrading.golden \
  %D%/week.golden
TESTS += %D%/examples.sh
