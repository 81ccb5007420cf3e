// Calls of the built command line, as a user or a build server makes them.
#pragma once

#include <nlohmann/json.hpp>
#include <string>

namespace lw::test {

using Json = nlohmann::ordered_json;

struct Ran {
  int code = -1;
  std::string out, err;
};

/// `linewright ARGUMENTS`, words quoted as for a shell, with `in` on stdin.
Ran linewright(const std::string& arguments, const std::string& in = "");

/// The JSON object a call printed; the test fails when it printed anything else or failed.
Json json_from(const std::string& arguments, const std::string& in = "");

/// A path in a folder of this test run's own.
std::string scratch(const std::string& name);

void save(const std::string& path, const std::string& text);
std::string load(const std::string& path);

/// scenarios/NAME.toml, in quotes for a shell.
std::string scenario(const std::string& name);

/// A short valid scenario on a straight, with more text at its end.
std::string straight_text(const std::string& more = "");

/// The keys of an object in order, separated by blanks.
std::string keys_of(const Json& object);

}  // namespace lw::test
