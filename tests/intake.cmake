# Tests of reading CSV: cells, files, curves, profiles, damaged files.
add_library(pf_intake_test_support STATIC support/lines.c support/pollute.c)
target_include_directories(pf_intake_test_support PUBLIC ${CMAKE_CURRENT_SOURCE_DIR} ${CMOCKA_INCLUDE_DIR})
target_compile_definitions(pf_intake_test_support PUBLIC PF_TEST_DATA="${CMAKE_CURRENT_SOURCE_DIR}")

set(INTAKE pf_intake_test_support pf_intake)
pf_test(test_intake_cells SOURCES unit/test_intake_cells.c LIBRARIES ${INTAKE})
pf_test(test_intake_files SOURCES unit/test_intake_files.c LIBRARIES ${INTAKE})
pf_test(test_intake_pollution SOURCES unit/test_intake_pollution.c LIBRARIES ${INTAKE})
pf_test(test_intake_chunks SOURCES unit/test_intake_chunks.c LIBRARIES ${INTAKE})

add_executable(table_dump support/table_dump.c)
target_link_libraries(table_dump PRIVATE pf_intake)
find_package(Python3 COMPONENTS Interpreter)
if(Python3_FOUND)
  add_test(NAME import_unchanged
    COMMAND ${Python3_EXECUTABLE} ${CMAKE_CURRENT_SOURCE_DIR}/cli/import_unchanged.py
      $<TARGET_FILE:passfet> ${CMAKE_CURRENT_SOURCE_DIR}/unit/nasty_files.tsv
      ${CMAKE_CURRENT_SOURCE_DIR}/unit/clean_parts.csv)
  add_test(NAME csv_compare
    COMMAND ${Python3_EXECUTABLE} ${CMAKE_CURRENT_SOURCE_DIR}/unit/csv_compare.py $<TARGET_FILE:table_dump>)
endif()
pf_test(test_intake_profile SOURCES unit/test_intake_profile.c LIBRARIES ${INTAKE})
pf_test(test_intake_run SOURCES unit/test_intake_run.c LIBRARIES ${INTAKE})
pf_test(test_intake_doc SOURCES unit/test_intake_doc.c LIBRARIES ${INTAKE})
pf_test(test_device_plausibility SOURCES unit/test_device_plausibility.c LIBRARIES pf_device)

# What everything stands on.
pf_test(test_base_number SOURCES unit/test_base_number.c LIBRARIES pf_base m)
pf_test(test_base_units SOURCES unit/test_base_units.c LIBRARIES pf_base m)

# Every allocation fails in turn.
pf_test(test_intake_memory SOURCES fault/test_intake_memory.c LIBRARIES ${INTAKE})
target_link_options(test_intake_memory PRIVATE -Wl,--wrap=calloc,--wrap=realloc)
