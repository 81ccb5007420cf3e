// The files of scenarios/ as they were put into the page (web/build/library.cmake).
#pragma once

#include <cstddef>

namespace lw::panel {

struct LibraryFile {
  const char* name;
  const char* text;
  std::size_t size;
};
extern const LibraryFile library_files[];
extern const std::size_t library_count;

}  // namespace lw::panel
