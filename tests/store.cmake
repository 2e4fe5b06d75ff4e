# Tests of the ratings database.
pf_test(test_store_import SOURCES unit/test_store_import.c unit/store_support.c LIBRARIES pf_store)
