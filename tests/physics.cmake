# Tests of the physics: parts and profiles written as texts (support/bench.h), no file, no SQL.
add_library(pf_test_support STATIC support/settings.c support/bench.c support/random_case.c)
target_include_directories(pf_test_support PUBLIC ${CMAKE_CURRENT_SOURCE_DIR})
target_link_libraries(pf_test_support PUBLIC pf_rank)

set(PHYSICS pf_test_support)
pf_test(test_numeric_curve SOURCES unit/test_numeric_curve.c LIBRARIES pf_numeric)
pf_test(test_device_part SOURCES unit/test_device_part.c LIBRARIES ${PHYSICS})
pf_test(test_device_curves SOURCES unit/test_device_curves.c LIBRARIES ${PHYSICS})
pf_test(test_device_soa SOURCES unit/test_device_soa.c LIBRARIES ${PHYSICS})
pf_test(test_stress_start_up SOURCES unit/test_stress_start_up.c LIBRARIES ${PHYSICS})
pf_test(test_stress_stall SOURCES unit/test_stress_stall.c LIBRARIES ${PHYSICS})
pf_test(test_stress_steady SOURCES unit/test_stress_steady.c LIBRARIES ${PHYSICS})
pf_test(test_stress_events SOURCES unit/test_stress_events.c LIBRARIES ${PHYSICS})
pf_test(test_stress_retry SOURCES unit/test_stress_retry.c LIBRARIES ${PHYSICS})
pf_test(test_stress_unassessed SOURCES unit/test_stress_unassessed.c LIBRARIES ${PHYSICS})
pf_test(test_stress_corners SOURCES unit/test_stress_corners.c LIBRARIES ${PHYSICS})
pf_test(test_stress_profile SOURCES unit/test_stress_profile.c LIBRARIES ${PHYSICS})
pf_test(test_rank_checks SOURCES unit/test_rank_checks.c LIBRARIES ${PHYSICS})
pf_test(test_rank_order SOURCES unit/test_rank_order.c LIBRARIES ${PHYSICS})
pf_test(test_rank_condition SOURCES unit/test_rank_condition.c LIBRARIES ${PHYSICS})

# Cross-checks with GSL, which nothing but tests needs.
set(GSL_TESTS ${PHYSICS} PkgConfig::GSL)
pf_test(test_cross_hot_spot SOURCES reference/test_cross_hot_spot.c reference/duhamel.c
  LIBRARIES ${GSL_TESTS})
pf_test(test_cross_start_up SOURCES reference/test_cross_start_up.c LIBRARIES ${GSL_TESTS})
pf_test(test_cross_junction SOURCES reference/test_cross_junction.c LIBRARIES ${GSL_TESTS})
pf_test(test_cross_closed SOURCES reference/test_cross_closed.c LIBRARIES ${GSL_TESTS})

# Reference records: data, one runner. docs/testing_worst.md is written by `reference_page`.
set(RECORDS soa thermal start_up steady_state turn_off derating)
list(TRANSFORM RECORDS PREPEND ${CMAKE_CURRENT_SOURCE_DIR}/reference/records/)
list(TRANSFORM RECORDS APPEND .tsv)
pf_test(test_reference SOURCES reference/test_reference.c reference/quantities.c
  LIBRARIES ${PHYSICS} ARGUMENTS ${RECORDS})
add_custom_target(reference_page
  COMMAND test_reference --write ${PROJECT_SOURCE_DIR}/docs/testing_worst.md ${RECORDS})
pf_test(test_properties SOURCES reference/test_properties.c LIBRARIES ${PHYSICS})

# The demo ratings and the derating rules, as files.
pf_test(test_device_demo SOURCES unit/test_device_demo.c LIBRARIES ${PHYSICS} pf_intake
  ARGUMENTS ${PROJECT_SOURCE_DIR}/data)
