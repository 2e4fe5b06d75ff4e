# Tests of what a design review asks: explain, headroom, compare, trials.
pf_test(test_review_explain SOURCES unit/test_review_explain.c LIBRARIES ${PHYSICS})
pf_test(test_review_headroom SOURCES unit/test_review_headroom.c LIBRARIES ${PHYSICS})
pf_test(test_review_compare SOURCES unit/test_review_compare.c LIBRARIES ${PHYSICS})
pf_test(test_review_trials SOURCES unit/test_review_trials.c LIBRARIES ${PHYSICS})
pf_test(test_review_capture SOURCES unit/test_review_capture.c LIBRARIES ${PHYSICS})

find_package(Python3 COMPONENTS Interpreter REQUIRED)
set(DEMO ${PROJECT_SOURCE_DIR}/data/demo)
pf_test(test_review_demo SOURCES unit/test_review_demo.c LIBRARIES pf_intake pf_rank
  ARGUMENTS ${DEMO} ${PROJECT_SOURCE_DIR}/data/derating.csv 11)
add_test(NAME explain_recompute COMMAND ${Python3_EXECUTABLE}
  ${CMAKE_CURRENT_SOURCE_DIR}/cli/explain_recompute.py $<TARGET_FILE:passfet> ${DEMO})
add_test(NAME compare_verdicts COMMAND ${Python3_EXECUTABLE}
  ${CMAKE_CURRENT_SOURCE_DIR}/cli/compare_verdicts.py $<TARGET_FILE:passfet> ${DEMO})
