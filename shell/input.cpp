#include "shell/input.h"

#include <cerrno>
#include <cstdio>
#include <cstring>
#include <filesystem>

#include "engine/scenario/link.h"
#include "engine/scenario/text.h"
#include "engine/scenario/validate.h"
#include "engine/scenario/value_text.h"

namespace lw::shell {
namespace {

Result<std::string> contents(std::FILE* file, const std::string& name) {
  std::string text;
  char piece[65536];
  std::size_t got = 0;
  while (text.size() <= most_text_bytes && (got = std::fread(piece, 1, sizeof piece, file)) > 0)
    text.append(piece, got);
  if (std::ferror(file)) return Error{name, "", "cannot be read: " + std::string(std::strerror(errno))};
  if (text.size() > most_text_bytes)
    return Error{name, "", "larger than the " + std::to_string(most_text_bytes) + " bytes of any scenario"};
  return text;
}

bool exists(const std::string& path) {
  std::error_code ignored;
  return std::filesystem::exists(path, ignored);
}

Result<std::string> file_contents(const std::string& path) {
  std::error_code ignored;
  if (std::filesystem::is_directory(path, ignored))
    return Error{path, "", "is a folder; a scenario is one file"};
  std::FILE* file = std::fopen(path.c_str(), "rb");
  const std::string shown = path.empty() ? "\"\"" : clipped(path, 200);
  if (!file) return Error{shown, "", "cannot be opened: " + std::string(std::strerror(errno))};
  auto text = contents(file, path);
  std::fclose(file);
  return text;
}

bool holds_link(std::string_view text) {
  const std::size_t end = text.find_last_not_of(" \t\r\n");
  return end != std::string_view::npos && text.substr(0, end).find('\n') == std::string_view::npos &&
         text.find_first_of("=\"") == std::string_view::npos && looks_like_link(text);
}

Result<Loaded> from_link(std::string_view link, std::string name) {
  const auto scenario = decode_link(link);
  if (!scenario) return scenario.error();
  return Loaded{std::move(name), true, *scenario};
}

Result<Loaded> read_input(const std::string& from) {
  if (from != "-" && !exists(from) && looks_like_link(from)) return from_link(from, "link");
  const std::string name = from == "-" ? "stdin" : from;
  const auto text = from == "-" ? contents(stdin, name) : file_contents(from);
  if (!text) return text.error();
  if (holds_link(*text)) return from_link(*text, name);
  const auto scenario = read(*text, name);
  if (!scenario) return scenario.error();
  return Loaded{name, false, *scenario};
}

Result<Scenario> with(const Scenario& scenario, const std::string& assignment) {
  const std::size_t equals = assignment.find('=');
  if (equals == std::string::npos || equals == 0)
    return Error{"", clipped(assignment), "KEY=VALUE is wanted, such as controller.kp=0.25"};
  return set_key(scenario, assignment.substr(0, equals), assignment.substr(equals + 1));
}

Error in_set(Error error) {
  error.where = "--set";
  return error;
}

}  // namespace

Result<Loaded> load(const Input& input) {
  auto loaded = read_input(input.from);
  if (!loaded || input.set.empty()) return loaded;
  for (const std::string& assignment : input.set) {
    const auto changed = with(loaded->scenario, assignment);
    if (!changed) return in_set(changed.error());
    loaded->scenario = *changed;
  }
  if (const auto fault = find_fault(loaded->scenario)) return error_of(*fault, loaded->name + " with --set");
  return loaded;
}

}  // namespace lw::shell
