// What a command gives back. Commands print nothing themselves, so that with an error nothing reaches stdout.
#pragma once

#include <nlohmann/json.hpp>
#include <string>
#include <string_view>
#include <vector>

#include "engine/numeric/result.h"

namespace lw::shell {

/// Keys stay in the order they were set.
using Json = nlohmann::ordered_json;

struct Answer {
  int exit = 0;                    // line.h
  std::string text;                // for people, ended by '\n'
  Json json;                       // the same for programs
  std::vector<std::string> notes;  // for stderr, one a line
  std::vector<Error> errors;       // when there are any, nothing else is printed and the exit code is 2
};

Answer refused(Error error);

/// Prints an answer as text or as one JSON object; returns the exit code.
int print(const Answer& answer, bool json);

/// A line on stderr.
void complain(std::string_view message);

/// Text on stdout. False when it could not be written, which is then said on stderr.
bool put(std::string_view text);

/// Writes a whole file.
Result<bool> write_file(const std::string& path, std::string_view text);

}  // namespace lw::shell
