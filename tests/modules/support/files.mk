# Suites of the layer support.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_support)

suites += %D%/t_arena
%C%_t_arena_SOURCES = %D%/t_arena.c
%C%_t_arena_LDADD = $(with_support)

suites += %D%/t_built_in
%C%_t_built_in_SOURCES = %D%/t_built_in.c
%C%_t_built_in_LDADD = $(with_support)

suites += %D%/t_csv
%C%_t_csv_SOURCES = %D%/t_csv.c
%C%_t_csv_LDADD = $(with_support)

suites += %D%/t_draw
%C%_t_draw_SOURCES = %D%/t_draw.c
%C%_t_draw_LDADD = $(with_support)

suites += %D%/t_fault
%C%_t_fault_SOURCES = %D%/t_fault.c
%C%_t_fault_LDADD = $(with_support)

suites += %D%/t_map
%C%_t_map_SOURCES = %D%/t_map.c
%C%_t_map_LDADD = $(with_support)

suites += %D%/t_number
%C%_t_number_SOURCES = %D%/t_number.c
%C%_t_number_LDADD = $(with_support)

suites += %D%/t_quadratic
%C%_t_quadratic_SOURCES = %D%/t_quadratic.c
%C%_t_quadratic_LDADD = $(with_support)

suites += %D%/t_reader
%C%_t_reader_SOURCES = %D%/t_reader.c
%C%_t_reader_LDADD = $(with_support)

suites += %D%/t_search_line
%C%_t_search_line_SOURCES = %D%/t_search_line.c
%C%_t_search_line_LDADD = $(with_support)

suites += %D%/t_search_settle
%C%_t_search_settle_SOURCES = %D%/t_search_settle.c
%C%_t_search_settle_LDADD = $(with_support)

suites += %D%/t_seen
%C%_t_seen_SOURCES = %D%/t_seen.c
%C%_t_seen_LDADD = $(with_support)

suites += %D%/t_statistics
%C%_t_statistics_SOURCES = %D%/t_statistics.c
%C%_t_statistics_LDADD = $(with_support)

suites += %D%/t_table
%C%_t_table_SOURCES = %D%/t_table.c
%C%_t_table_LDADD = $(with_support)

suites += %D%/t_text
%C%_t_text_SOURCES = %D%/t_text.c
%C%_t_text_LDADD = $(with_support)
