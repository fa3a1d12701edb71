# The manual pages.  gaswright.7 has the pages of help in it: topics.awk renews that part.

dist_man_MANS = \
  %D%/gaswright-tables.5 \
  %D%/gaswright.1 \
  %D%/gaswright.7
EXTRA_DIST += %D%/topics.awk
