#include "tests/pins/pins.h"

#include <dirent.h>

#include <algorithm>
#include <cinttypes>
#include <cstdio>
#include <sstream>

#include "engine/numeric/hash.h"
#include "engine/scenario/fields.h"
#include "engine/scenario/value_text.h"

namespace lw::test {
namespace {

std::string hex(std::uint64_t value, int digits) {
  char text[17];
  std::snprintf(text, sizeof text, "%0*" PRIx64, digits, value);
  return text;
}

bool take_pin(const std::string& line, Pin& pin) {
  std::istringstream words(line);
  std::string more;
  return words >> pin.name >> pin.outcome >> pin.steps >> pin.hash && !(words >> more) &&
         pin.hash.size() == 16 && pin.steps > 0;
}

bool take_checkpoints(const std::string& line, Pin& pin) {
  std::istringstream words(line);
  for (std::string word; words >> word;) {
    if (word.size() != 8 || word.find_first_not_of("0123456789abcdef") != std::string::npos) return false;
    pin.checkpoints.push_back(static_cast<std::uint32_t>(std::stoul(word, nullptr, 16)));
  }
  return true;
}

std::string shown(double value) { return number_text(value) + " (bits " + hex(bits_of(value), 16) + ")"; }

std::string exact_difference(const Trace& trace, const Trace& reference) {
  TraceDifference found;
  if (!first_difference(reference, trace, found)) return "the reference trace is the same";
  return "first differs at step " + std::to_string(found.row) + " in " + found.field + ": pinned " +
         shown(found.first) + ", found " + shown(found.second);
}

std::string block_difference(const Pin& pinned, const Pin& found) {
  std::size_t block = 0;
  while (block < std::min(pinned.checkpoints.size(), found.checkpoints.size()) &&
         pinned.checkpoints[block] == found.checkpoints[block])
    ++block;
  const std::size_t first = block * steps_per_block;
  return "first differs at one of the steps " + std::to_string(first) + " to " +
         std::to_string(first + steps_per_block - 1) +
         "; run tests/pins/compare once, and this test then tells step and field";
}

}  // namespace

Pin pin_of(std::string name, const Summary& summary, const Trace& trace) {
  Pin pin{
      std::move(name), std::string(name_of(summary.outcome)), summary.steps, hex(trace_hash(trace), 16), {}};
  std::uint64_t hash = fnv_start;
  for (std::size_t row = 0; row < trace.rows.size(); ++row) {
    hash = hash_row(hash, trace, row);
    if ((row + 1) % steps_per_block == 0) pin.checkpoints.push_back(static_cast<std::uint32_t>(hash));
  }
  return pin;
}

std::string pin_text(const Pin& pin) {
  std::string text = pin.name + ' ' + pin.outcome + ' ' + std::to_string(pin.steps) + ' ' + pin.hash + '\n';
  constexpr std::size_t per_line = 11;
  for (std::size_t i = 0; i < pin.checkpoints.size(); ++i) {
    text += ' ' + hex(pin.checkpoints[i], 8);
    if (i % per_line == per_line - 1 || i + 1 == pin.checkpoints.size()) text += '\n';
  }
  return text;
}

Result<std::vector<Pin>> read_pins(std::string_view text) {
  std::istringstream lines{std::string(text)};
  std::vector<Pin> pins;
  int number = 0;
  for (std::string line; std::getline(lines, line);) {
    ++number;
    if (line.empty() || line[0] == '#') continue;
    bool taken = false;
    if (line[0] == ' ') {
      taken = !pins.empty() && take_checkpoints(line, pins.back());
    } else {
      pins.emplace_back();
      taken = take_pin(line, pins.back());
    }
    if (!taken) return Error{"tests/pins.txt:" + std::to_string(number), line, "not the form of a pin"};
  }
  return pins;
}

std::string difference(const Pin& pinned, const Pin& found, const Trace& trace, const Trace* reference) {
  if (pinned.hash == found.hash && pinned.steps == found.steps && pinned.outcome == found.outcome) return "";
  const auto line = [](const Pin& pin) {
    return pin.outcome + " after " + std::to_string(pin.steps) + " steps, trace hash " + pin.hash;
  };
  return found.name + ": pinned " + line(pinned) + "; found " + line(found) + "; " +
         (reference ? exact_difference(trace, *reference) : block_difference(pinned, found));
}

std::string file_text(const std::string& path) {
  std::string text;
  if (std::FILE* file = std::fopen(path.c_str(), "rb")) {
    char piece[65536];
    for (std::size_t got = 0; (got = std::fread(piece, 1, sizeof piece, file)) > 0;) text.append(piece, got);
    std::fclose(file);
  }
  return text;
}

std::vector<std::string> scenario_names() {
  const std::string ending = ".toml";
  std::vector<std::string> names;
  if (DIR* folder = opendir(LINEWRIGHT_SOURCE_DIR "/scenarios")) {
    while (const dirent* entry = readdir(folder)) {
      const std::string name = entry->d_name;
      if (name.size() > ending.size() && name.substr(name.size() - ending.size()) == ending)
        names.push_back(name.substr(0, name.size() - ending.size()));
    }
    closedir(folder);
  }
  std::sort(names.begin(), names.end());
  return names;
}

std::string scenario_path(const std::string& name) {
  return LINEWRIGHT_SOURCE_DIR "/scenarios/" + name + ".toml";
}

}  // namespace lw::test
