# Coverage-guided fuzzing of everything that reads foreign bytes. With clang and PF_FUZZ the targets
# are built; in every other build one test builds them beside it and runs each for a few seconds.
#
# Longer: tests/fuzz/run.sh BUILD_FOLDER SECONDS_PER_TARGET
set(FUZZ_TARGETS table number cell profile ratings)

if(PF_FUZZ)
  foreach(target IN LISTS FUZZ_TARGETS)
    add_executable(fuzz_${target} fuzz/fuzz_${target}.c)
    target_link_libraries(fuzz_${target} PRIVATE pf_intake)
    target_link_options(fuzz_${target} PRIVATE -fsanitize=fuzzer)
    list(APPEND FUZZ_PROGRAMS fuzz_${target})
  endforeach()
  add_custom_target(fuzz_targets DEPENDS ${FUZZ_PROGRAMS})
else()
  add_test(NAME fuzz_for_30_seconds
    COMMAND sh ${CMAKE_CURRENT_SOURCE_DIR}/fuzz/run.sh ${CMAKE_BINARY_DIR}/fuzz 6)
  set_tests_properties(fuzz_for_30_seconds PROPERTIES SKIP_RETURN_CODE 77 TIMEOUT 600)
endif()
