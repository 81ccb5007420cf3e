#include "web/panel/files.h"

#include <cctype>
#include <cstdio>
#include <cstdlib>
#include <utility>

#include "engine/drive/trace_text.h"
#include "engine/scenario/link.h"
#include "engine/scenario/text.h"
#include "engine/scenario/value_text.h"
#include "web/host.h"
#include "web/panel/library.h"

namespace lw::panel {
namespace {

constexpr std::string_view scenario_key = "linewright.scenario";
constexpr std::string_view look_key = "linewright.look";

std::string_view trimmed(std::string_view text) {
  const auto blank = [](char c) { return c == ' ' || c == '\t' || c == '\r' || c == '\n'; };
  while (!text.empty() && blank(text.front())) text.remove_prefix(1);
  while (!text.empty() && blank(text.back())) text.remove_suffix(1);
  return text;
}

std::string kilobytes(std::size_t bytes) {
  return bytes < 1000 ? std::to_string(bytes) + " characters" : std::to_string((bytes + 500) / 1000) + " KB";
}

}  // namespace

bool take_text(Desk& desk, std::string_view text, std::string_view name) {
  const bool link = looks_like_link(trimmed(text));
  Result<Scenario> scenario = link ? decode_link(text) : read(text, name);
  std::optional<Error> error;
  if (!scenario.ok()) {
    error = scenario.error();
  } else if (const Result<Plan> plan = make_plan(*scenario); !plan.ok()) {  // a course that cannot be laid
    error = plan.error();
    error->where = error->where.empty() ? std::string(name) : std::string(name) + ": " + error->where;
  }
  if (error) {
    complain(desk, "Not opened. " + text_of(*error));
    return false;
  }
  const std::string title = scenario->title;
  replace(desk, std::move(*scenario));
  say(desk, title.empty() ? "Opened " + clipped(name) + "." : "Opened \"" + clipped(title) + "\".");
  return true;
}

Result<std::string> link_of(const Scenario& scenario) {
  Result<std::string> fragment = encode_link(scenario);
  if (!fragment.ok()) return fragment;
  return host::address() + "#" + *fragment;
}

void copy_link(Desk& desk) {
  const Result<std::string> link = link_of(desk.scenario);
  if (!link.ok()) {
    complain(desk, "No link. " + text_of(link.error()));
    return;
  }
  host::copy_text(*link);
  say(desk, "Link copied (" + kilobytes(link->size()) + "). It holds the whole scenario.");
}

std::string file_stem(std::string_view title) {
  std::string stem;
  for (char c : title) {
    const auto byte = static_cast<unsigned char>(c);
    if (std::isalnum(byte) && byte < 0x80) {
      stem += static_cast<char>(std::tolower(byte));
    } else if (!stem.empty() && stem.back() != '-') {
      stem += '-';
    }
    if (stem.size() >= 60) break;
  }
  while (!stem.empty() && stem.back() == '-') stem.pop_back();
  return stem.empty() ? "scenario" : stem;
}

void save_scenario(Desk& desk) {
  const std::string name = file_stem(desk.scenario.title) + ".toml";
  host::save_file(name, write(desk.scenario), "application/toml");
  say(desk, "Saved as " + name + ".");
}

void save_trace(Desk& desk) {
  if (!has_drive(desk)) return;
  const std::string name = file_stem(desk.good.scenario.title) + "-trace.csv";
  host::save_file(name, trace_csv(desk.good.trace), "text/csv");
  say(desk, "Saved as " + name + ".");
}

std::vector<LibraryEntry> read_library() {
  std::vector<LibraryEntry> entries;
  for (std::size_t i = 0; i < library_count; ++i) {
    const LibraryFile& file = library_files[i];
    Result<Scenario> scenario = read({file.text, file.size}, file.name);
    if (scenario.ok()) entries.push_back({file.name, std::move(*scenario)});
  }
  return entries;
}

void keep_in_browser(Desk& desk) {
  host::store(scenario_key, write(desk.scenario));
  const Result<std::string> fragment = encode_link(desk.scenario);
  if (fragment.ok()) host::set_fragment(*fragment);
}

std::optional<Scenario> kept_in_browser() {
  const std::string text = host::stored(scenario_key);
  if (text.empty()) return std::nullopt;
  Result<Scenario> scenario = read(text, "kept");
  if (!scenario.ok()) return std::nullopt;
  return std::move(*scenario);
}

void keep_look(const Desk& desk, PanelState& state) {
  // "1 dark scale strips open", one word each; a later version that needs more begins with another number.
  const std::string text = std::string("1 ") + (desk.dark ? "1 " : "0 ") + number_text(state.wanted_scale) +
                           " " + std::to_string(state.charts.shown) + (state.charts.open ? " 1" : " 0");
  if (text == state.look_kept) return;
  state.look_kept = text;
  host::store(look_key, text);
}

void restore_look(Desk& desk, PanelState& state) {
  const std::string text = host::stored(look_key);
  int version = 0, dark = 1, open = 1;
  float scale = 1.0f;
  unsigned shown = 0;
  if (std::sscanf(text.c_str(), "%d %d %f %u %d", &version, &dark, &scale, &shown, &open) != 5 ||
      version != 1)
    return;
  desk.dark = dark != 0;
  if (scale >= least_scale && scale <= most_scale) state.wanted_scale = scale;
  state.charts.shown = shown;
  state.charts.open = open != 0;
}

}  // namespace lw::panel
