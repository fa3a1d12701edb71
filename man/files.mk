# The manual pages.

dist_man_MANS =
