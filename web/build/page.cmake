# What is drawn, as one library for both worlds; for the wasm kind also the page itself and its worker.
# Included by the top CMakeLists.txt. Results of the wasm kind: DIR/page (a folder for any static host) and
# DIR/page-single/linewright.html (one file that opens from disk).

include(web/build/parts.cmake)  # Dear ImGui

# The typeface as C++ arrays, in files of the build folder.
set(typeface_source ${CMAKE_BINARY_DIR}/generated/typeface_data.cpp)
set(typeface_files ${LINEWRIGHT_PARTS}/typeface/Regular.otf ${LINEWRIGHT_PARTS}/typeface/SemiBold.otf)
add_custom_command(OUTPUT ${typeface_source}
                   DEPENDS ${typeface_files} ${CMAKE_SOURCE_DIR}/web/build/embed.cmake
                   COMMAND ${CMAKE_COMMAND} "-DOUT=${typeface_source}"
                           "-DNAMES=typeface_regular;typeface_strong" "-DFILES=${typeface_files}"
                           -P ${CMAKE_SOURCE_DIR}/web/build/embed.cmake VERBATIM)

# The scenarios that the page offers, likewise.
set(library_source ${CMAKE_BINARY_DIR}/generated/library_data.cpp)
file(GLOB library_files CONFIGURE_DEPENDS scenarios/*.toml)
add_custom_command(OUTPUT ${library_source}
                   DEPENDS ${library_files} ${CMAKE_SOURCE_DIR}/web/build/library.cmake
                   COMMAND ${CMAKE_COMMAND} "-DOUT=${library_source}" "-DFILES=${library_files}"
                           -P ${CMAKE_SOURCE_DIR}/web/build/library.cmake VERBATIM)

file(GLOB page_ui_sources CONFIGURE_DEPENDS web/*.cpp web/panel/*.cpp web/view/*.cpp)
add_library(page_ui STATIC ${page_ui_sources} web/page/typeface.cpp web/page/items.cpp
            web/page/damage.cpp ${typeface_source} ${library_source})
target_link_libraries(page_ui PRIVATE conversion_warnings PUBLIC engine imgui)

if(NOT LINEWRIGHT_KIND STREQUAL "wasm")
  return()
endif()

set(module_options -O2 -sMODULARIZE=1 -sALLOW_MEMORY_GROWTH=1 -sFILESYSTEM=0 -sDYNAMIC_EXECUTION=0
    -sMALLOC=emmalloc -sEXPORTED_FUNCTIONS=_malloc,_free)

add_executable(page web/page/main.cpp web/page/fingers.cpp web/page/host_browser.cpp
               web/page/painter.cpp web/page/picture.cpp web/page/sdl_absent.c
               ${imgui_root}/backends/imgui_impl_sdl2.cpp)
set_source_files_properties(${imgui_root}/backends/imgui_impl_sdl2.cpp PROPERTIES COMPILE_OPTIONS -w)
target_include_directories(page SYSTEM BEFORE PRIVATE ${sdl_root}/include)
target_include_directories(page SYSTEM PRIVATE ${imgui_root}/backends)
target_link_libraries(page PRIVATE conversion_warnings page_ui sdl)
target_link_options(page PRIVATE ${module_options} -sENVIRONMENT=web -sEXPORT_NAME=linewrightPage
                    -sMIN_WEBGL_VERSION=2 -sMAX_WEBGL_VERSION=2 -sINITIAL_MEMORY=33554432)

file(GLOB worker_sources CONFIGURE_DEPENDS web/worker/*.cpp)
add_executable(worker web/page/worker.cpp ${worker_sources})
target_link_libraries(worker PRIVATE conversion_warnings engine)
target_link_options(worker PRIVATE ${module_options} -sENVIRONMENT=worker
                    -sEXPORT_NAME=linewrightWorker --no-entry)

# The page's texts and both modules, put together by node (which Emscripten needs anyway).
set(page_texts index.html page.css page.js worker.js)
list(TRANSFORM page_texts PREPEND ${CMAKE_SOURCE_DIR}/web/page/)
find_program(LINEWRIGHT_NODE NAMES node nodejs REQUIRED NO_CMAKE_FIND_ROOT_PATH)
add_custom_command(OUTPUT ${CMAKE_BINARY_DIR}/page-single/linewright.html
                   DEPENDS page worker ${page_texts} ${CMAKE_SOURCE_DIR}/web/build/assemble.mjs
                   COMMAND ${LINEWRIGHT_NODE} ${CMAKE_SOURCE_DIR}/web/build/assemble.mjs
                           ${CMAKE_SOURCE_DIR}/web/page ${CMAKE_BINARY_DIR} ${LINEWRIGHT_PARTS} VERBATIM)
add_custom_target(assemble ALL DEPENDS ${CMAKE_BINARY_DIR}/page-single/linewright.html)
