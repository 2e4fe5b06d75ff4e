# Tests of reports and of the command. The latter: python3, one program of claims per file. In tests/cli/support.py: how they run it.
function(pf_cli_test name)
  add_test(NAME ${name} COMMAND ${Python3_EXECUTABLE} -B ${CMAKE_CURRENT_SOURCE_DIR}/cli/${name}.py
    $<TARGET_FILE:passfet> ${PROJECT_SOURCE_DIR})
  set_tests_properties(${name} PROPERTIES LABELS command TIMEOUT 900)
endfunction()

pf_test(test_report_text SOURCES unit/test_report_text.c LIBRARIES pf_report m)

find_package(Python3 COMPONENTS Interpreter REQUIRED)
pf_cli_test(test_exit)
pf_cli_test(test_rank)
pf_cli_test(test_exchange)
pf_cli_test(test_manual)

# After an installation other projects find the library, and the command runs.
add_test(NAME install
  COMMAND sh ${CMAKE_CURRENT_SOURCE_DIR}/install/run.sh ${CMAKE_BINARY_DIR} ${CMAKE_CURRENT_SOURCE_DIR}/install)
set_tests_properties(install PROPERTIES LABELS plain_only TIMEOUT 900)

# What the README promises of a fresh clone.
add_test(NAME demo_twice COMMAND sh ${CMAKE_CURRENT_SOURCE_DIR}/install/demo_twice.sh ${PROJECT_SOURCE_DIR})
set_tests_properties(demo_twice PROPERTIES LABELS plain_only TIMEOUT 900)
