# One test binary, linewright_tests, over every tests/**/*.cpp (the folders mirror the rooms). Included by the
# top CMakeLists.txt. Adding a test file needs no edit here.
#
# The tests include only tests/catch.h, which works with Catch2 2 (Debian 12) and 3 (later).

if(LINEWRIGHT_KIND STREQUAL "wasm")
  link_headers(catch2 catch2/catch.hpp catch2)  # Catch2 2 is headers alone, so em++ can have it as well
  if(catch2_parent)
    set(catch_found ON)
  endif()
else()
  find_package(Catch2 QUIET)
  set(catch_found ${Catch2_FOUND})
endif()
if(NOT catch_found)
  message(STATUS "Catch2 is missing: built without tests. On Debian: apt-get install catch2")
  return()
endif()

file(GLOB_RECURSE test_sources CONFIGURE_DEPENDS tests/*.cpp)
list(FILTER test_sources EXCLUDE REGEX "/tests/benchmark/")
if(NOT TARGET page_ui)
  list(FILTER test_sources EXCLUDE REGEX "/tests/web/")
endif()
if(NOT TARGET shell)
  list(FILTER test_sources EXCLUDE REGEX "/tests/shell/")
endif()

add_executable(linewright_tests ${test_sources})
target_link_libraries(linewright_tests PRIVATE warnings engine)
# The folder of the repository, so that tests find scenarios/ and the fixtures wherever they are run from.
target_compile_definitions(linewright_tests PRIVATE LINEWRIGHT_SOURCE_DIR="${CMAKE_SOURCE_DIR}"
                           LINEWRIGHT_BINARY_DIR="${CMAKE_BINARY_DIR}")
target_precompile_headers(linewright_tests PRIVATE ${CMAKE_SOURCE_DIR}/tests/catch.h)
# All of Catch2 2 is compiled in this one file; optimised, that takes longer than the engine.
set_source_files_properties(tests/main.cpp PROPERTIES SKIP_PRECOMPILE_HEADERS ON COMPILE_OPTIONS -O0)
if(TARGET page_ui)
  target_sources(linewright_tests PRIVATE web/page/host_null.cpp  # the panel's browser, played
                 web/page/picture_null.cpp)
endif()
foreach(room shell page_ui)
  if(TARGET ${room})
    target_link_libraries(linewright_tests PRIVATE ${room})
  endif()
endforeach()
if(TARGET linewright)
  add_dependencies(linewright_tests linewright)
  target_compile_definitions(linewright_tests PRIVATE LINEWRIGHT_COMMAND="$<TARGET_FILE:linewright>")
endif()

if(LINEWRIGHT_KIND STREQUAL "wasm")
  target_link_options(linewright_tests PRIVATE ${node_link_options})
  add_test(NAME linewright_tests COMMAND linewright_tests)
else()
  target_link_libraries(linewright_tests PRIVATE Catch2::Catch2)
  include(Catch)
  catch_discover_tests(linewright_tests)
endif()
