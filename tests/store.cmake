# Tests of the ratings database.
set(STORE_SUPPORT unit/store_support.c)
pf_test(test_store_import SOURCES unit/test_store_import.c ${STORE_SUPPORT} LIBRARIES pf_store)
pf_test(test_store_history SOURCES unit/test_store_history.c ${STORE_SUPPORT} LIBRARIES pf_store)
pf_test(test_store_merge SOURCES unit/test_store_merge.c ${STORE_SUPPORT} LIBRARIES pf_store)
pf_test(test_store_health SOURCES unit/test_store_health.c ${STORE_SUPPORT}
  LIBRARIES pf_store PkgConfig::SQLITE)
pf_test(test_store_docs SOURCES unit/test_store_docs.c ${STORE_SUPPORT}
  LIBRARIES pf_store PkgConfig::SQLITE)
target_compile_definitions(test_store_docs PRIVATE PF_SOURCE_FOLDER="${PROJECT_SOURCE_DIR}")

# The same under adverse conditions; PF_FAULT_FULL in the environment: the full counts.
set(STORE_LOAD fault/store_load.c ${STORE_SUPPORT})
pf_test(test_store_many SOURCES fault/test_store_many.c ${STORE_LOAD} LIBRARIES pf_store)
pf_test(test_store_kill SOURCES fault/test_store_kill.c ${STORE_LOAD} LIBRARIES pf_store)
pf_test(test_store_flips SOURCES fault/test_store_flips.c ${STORE_LOAD} LIBRARIES pf_store)
pf_test(test_store_memory SOURCES fault/test_store_memory.c ${STORE_LOAD}
  LIBRARIES pf_store PkgConfig::SQLITE)
target_link_options(test_store_memory PRIVATE
  -Wl,--wrap=malloc -Wl,--wrap=calloc -Wl,--wrap=realloc)
add_executable(store_driver fault/store_driver.c fault/store_load.c)
target_include_directories(store_driver PRIVATE ${CMAKE_CURRENT_SOURCE_DIR})
target_link_libraries(store_driver PRIVATE pf_store)
add_test(NAME test_store_calls COMMAND sh ${CMAKE_CURRENT_SOURCE_DIR}/fault/kill_at_calls.sh
  $<TARGET_FILE:store_driver>)
set_tests_properties(test_store_calls PROPERTIES SKIP_RETURN_CODE 77)
find_package(Python3 COMPONENTS Interpreter)
if(Python3_FOUND AND TARGET passfet)
  add_test(NAME test_store_commands COMMAND ${Python3_EXECUTABLE}
    ${CMAKE_CURRENT_SOURCE_DIR}/fault/flip_commands.py $<TARGET_FILE:passfet>
    ${PROJECT_SOURCE_DIR}/data/demo)
endif()
add_test(NAME test_store_disk_full COMMAND sh ${CMAKE_CURRENT_SOURCE_DIR}/fault/disk_full.sh
  $<TARGET_FILE:store_driver>)
set_tests_properties(test_store_disk_full PROPERTIES SKIP_RETURN_CODE 77)
