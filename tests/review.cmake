# Tests of what a design review asks: explain, headroom, compare, trials.
pf_test(test_review_explain SOURCES unit/test_review_explain.c LIBRARIES ${PHYSICS})
pf_test(test_review_headroom SOURCES unit/test_review_headroom.c LIBRARIES ${PHYSICS})
