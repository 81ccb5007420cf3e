# zlib, SDL and Dear ImGui from the sources that web/build/parts has fetched. Included by the top
# CMakeLists.txt: for a native build only Dear ImGui, without a backend, so that the panel's tests run without
# a window. Warnings in other people's sources are theirs: -w.

include_guard()
if(NOT EXISTS "${LINEWRIGHT_PARTS}/pins")
  message(FATAL_ERROR "No sources in ${LINEWRIGHT_PARTS}: run web/build/parts first")
endif()
set(imgui_root ${LINEWRIGHT_PARTS}/imgui)
add_library(imgui STATIC ${imgui_root}/imgui.cpp ${imgui_root}/imgui_draw.cpp ${imgui_root}/imgui_tables.cpp
            ${imgui_root}/imgui_widgets.cpp)
target_include_directories(imgui SYSTEM PUBLIC ${imgui_root})
target_compile_definitions(imgui PUBLIC IMGUI_USER_CONFIG="${CMAKE_SOURCE_DIR}/web/page/imgui_config.h")
target_compile_options(imgui PRIVATE -w)
if(NOT LINEWRIGHT_KIND STREQUAL "wasm")
  return()
endif()

set(zlib_root ${LINEWRIGHT_PARTS}/zlib)
set(zlib_sources adler32 compress crc32 deflate inffast inflate inftrees trees uncompr zutil)
list(TRANSFORM zlib_sources PREPEND ${zlib_root}/)
list(TRANSFORM zlib_sources APPEND .c)
add_library(zlib STATIC ${zlib_sources})
target_include_directories(zlib SYSTEM PUBLIC ${zlib_root})
target_compile_options(zlib PRIVATE -w)
add_library(ZLIB::ZLIB ALIAS zlib)

# SDL's own configure takes minutes under Emscripten and settles nothing: its header for Emscripten is chosen
# by itself. Only window, events and the GL context are wanted, so the other parts stay out.
set(sdl_root ${LINEWRIGHT_PARTS}/sdl)
set(sdl_src ${sdl_root}/src)
file(GLOB sdl_sources ${sdl_src}/*.c ${sdl_src}/atomic/*.c ${sdl_src}/cpuinfo/*.c ${sdl_src}/dynapi/*.c
     ${sdl_src}/events/*.c ${sdl_src}/file/SDL_rwops.c ${sdl_src}/stdlib/*.c ${sdl_src}/thread/SDL_thread.c
     ${sdl_src}/thread/generic/*.c ${sdl_src}/timer/SDL_timer.c ${sdl_src}/timer/unix/*.c ${sdl_src}/video/*.c
     ${sdl_src}/video/yuv2rgb/yuv_rgb.c ${sdl_src}/video/emscripten/*.c ${sdl_src}/locale/*.c
     ${sdl_src}/locale/emscripten/*.c ${sdl_src}/misc/*.c ${sdl_src}/misc/emscripten/*.c
     ${sdl_src}/filesystem/emscripten/*.c ${sdl_src}/loadso/dummy/*.c)
add_library(sdl STATIC ${sdl_sources})
# Ahead of Emscripten's own SDL 1, whose headers em++ would find otherwise.
target_include_directories(sdl BEFORE PUBLIC ${sdl_root}/include)
target_compile_options(sdl PRIVATE -w -Os "SHELL:-idirafter ${sdl_src}/video/khronos")
foreach(part AUDIO JOYSTICK HAPTIC HIDAPI SENSOR POWER RENDER LOADSO)
  target_compile_definitions(sdl PRIVATE SDL_${part}_DISABLED=1)
endforeach()

# node 18 and later have a global fetch() that Emscripten 3.1.6 takes for a browser's: everything in one file
# then.
set(node_link_options -O1 -sENVIRONMENT=node -sSINGLE_FILE=1 -sALLOW_MEMORY_GROWTH=1 -sEXIT_RUNTIME=1
    -sNODERAWFS=1)
# Emscripten's own scripts need the modules of Debian's node, which another node does not look for by itself.
set_property(GLOBAL PROPERTY RULE_LAUNCH_LINK "${CMAKE_COMMAND} -E env NODE_PATH=/usr/share/nodejs")
