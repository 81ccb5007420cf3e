// Running the Python scripts of this folder from a test.
#pragma once

#ifndef __EMSCRIPTEN__  // a test inside node cannot start other programs

#include <cstdlib>
#include <fstream>
#include <string>

#include "tests/catch.h"

namespace lw::test {

/// A Python that has `modules` ("scipy, tomllib"), or an empty text after a warning that says what was not
/// checked.
inline std::string python_with(const std::string& modules, const std::string& unchecked) {
  for (const char* python : {"python3", "/usr/bin/python3"}) {
    if (std::system((std::string(python) + " -c 'import " + modules + "' 2>/dev/null").c_str()) == 0)
      return python;
  }
  WARN("no python3 with " << modules << ": " << unchecked << " was not held against it");
  return "";
}

inline std::string outside_script(const std::string& name) {
  return LINEWRIGHT_SOURCE_DIR "/tests/outside/" + name;
}

/// A file of the build folder with these bytes; returns its path.
inline std::string saved(const std::string& name, const std::string& bytes) {
  const std::string path = LINEWRIGHT_BINARY_DIR "/" + name;
  std::ofstream file(path, std::ios::binary);
  file << bytes;
  REQUIRE(file.flush());
  return path;
}

/// Runs a script of this folder; true when it ends with 0.
inline bool passes(const std::string& python, const std::string& script, const std::string& arguments) {
  return std::system((python + " '" + outside_script(script) + "' " + arguments).c_str()) == 0;
}

}  // namespace lw::test

#endif
