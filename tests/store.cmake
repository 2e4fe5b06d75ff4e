# Tests of the ratings database.
pf_test(test_store_import SOURCES unit/test_store_import.c unit/store_support.c LIBRARIES pf_store)
pf_test(test_store_history SOURCES unit/test_store_history.c unit/store_support.c LIBRARIES pf_store)
pf_test(test_store_health SOURCES unit/test_store_health.c unit/store_support.c LIBRARIES pf_store
  PkgConfig::SQLITE)
