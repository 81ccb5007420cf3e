#include "tests/shell/calls.h"

#include <sys/wait.h>

#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <iterator>

#include "tests/catch.h"

namespace lw::test {

namespace {

/// A folder that is gone when the tests end.
struct Folder {
  std::string path = LINEWRIGHT_BINARY_DIR "/shell_tests.XXXXXX";
  Folder() { REQUIRE(mkdtemp(path.data()) != nullptr); }
  ~Folder() {
    std::error_code ignored;
    std::filesystem::remove_all(path, ignored);
  }
};

}  // namespace

std::string scratch(const std::string& name) {
  static const Folder folder;
  return folder.path + '/' + name;
}

void save(const std::string& path, const std::string& text) {
  std::ofstream file(path, std::ios::binary);
  file << text;
  REQUIRE(file.flush());
}

std::string load(const std::string& path) {
  std::ifstream file(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(file), std::istreambuf_iterator<char>()};
}

Ran linewright(const std::string& arguments, const std::string& in) {
  const std::string given = scratch("stdin"), out = scratch("stdout"), err = scratch("stderr");
  save(given, in);
  const std::string call =
      "'" LINEWRIGHT_COMMAND "' " + arguments + " <'" + given + "' >'" + out + "' 2>'" + err + "'";
  const int status = std::system(call.c_str());
  return {WIFEXITED(status) ? WEXITSTATUS(status) : -1, load(out), load(err)};
}

Json json_from(const std::string& arguments, const std::string& in) {
  const Ran ran = linewright(arguments, in);
  INFO("linewright " << arguments << "\n" << ran.err);
  REQUIRE(ran.code == 0);
  const Json json = Json::parse(ran.out, nullptr, false);
  REQUIRE(json.is_object());
  return json;
}

std::string scenario(const std::string& name) {
  return "'" LINEWRIGHT_SOURCE_DIR "/scenarios/" + name + ".toml'";
}

std::string straight_text(const std::string& more) {
  return "format = \"linewright 1\"\n[course]\nclosed = false\npieces = [{ straight_mm = 1000.0 }]\n" + more;
}

std::string keys_of(const Json& object) {
  std::string keys;
  for (const auto& [key, value] : object.items()) keys += (keys.empty() ? "" : " ") + key;
  return keys;
}

}  // namespace lw::test
