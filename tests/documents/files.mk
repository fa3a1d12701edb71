# Documents: help, manual pages, README and demo show what the program does.
EXTRA_DIST += \
  %D%/examples.sh \
  %D%/morning.golden \
  %D%/morning.py \
  %D%/preamble.gw \
  %D%/quarrels.golden \
  %D%/renew.sh \
  %D%/replay.awk \
  %D%/week.golden
TESTS += %D%/examples.sh
