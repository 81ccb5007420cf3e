#include "tests/benchmark/search_table.h"

#include <algorithm>
#include <chrono>
#include <cmath>
#include <cstdio>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <string>
#include <vector>

#include "engine/scenario/text.h"
#include "engine/tuning/rules.h"
#include "engine/tuning/search.h"

namespace lw::benchmark {
namespace {

std::vector<std::string> scenario_files() {
  std::vector<std::string> names;
  for (const auto& entry : std::filesystem::directory_iterator(LINEWRIGHT_SOURCE_DIR "/scenarios"))
    if (entry.path().extension() == ".toml") names.push_back(entry.path().string());
  std::sort(names.begin(), names.end());
  return names;
}

Result<Scenario> read_file(const std::string& name) {
  std::ifstream file(name, std::ios::binary);
  const std::string text((std::istreambuf_iterator<char>(file)), {});
  return read(text, name);
}

/// Gains alone, at the scenario's own base: what rules can set. The same limits for all.
SearchSettings settings_for(const Scenario& scenario) {
  SearchSettings settings;
  settings.free = {
      {Variable::kp, {}, {}}, {Variable::ki, {}, {}}, {Variable::kd, {}, {}}, {Variable::filter, {}, {}}};
  settings.goal = Goal::deviation;
  settings.limits.gain_margin_db = 6.0;
  settings.limits.saturated_pct = scenario.expect.saturated_pct_max;
  settings.limits.reversals_per_s = scenario.expect.reversals_per_s_max;
  settings.front_share = 0.0;
  settings.starts = rule_starts(scenario, settings.free);
  return settings;
}

Worth worth_of(const Candidate& candidate) { return {candidate.breach, candidate.deviation_max}; }

struct Ruled {
  const char* name = nullptr;  // null where no rule can be set
  Candidate candidate;
};

/// The best of the rules, judged as the search judges.
Ruled best_rule(const Scenario& scenario, const SearchSettings& settings) {
  Ruled best;
  for (std::size_t i = 0; i < settings.starts.size(); ++i) {
    const auto judged = judge(with_values(scenario, settings.free, settings.starts[i]), settings);
    if (judged && (!best.name || better(worth_of(*judged), worth_of(best.candidate))))
      best = {published_rules[i].name, *judged};
  }
  return best;
}

std::string deviation_text(const Candidate& candidate) {
  char text[32];
  std::snprintf(text, sizeof text, "%.2f mm%s", 1e3 * candidate.deviation_max,
                candidate.breach > 0.0 ? " (!)" : "");
  return text;
}

/// Prints a row; true when a rule beats the search.
bool print_row(const std::string& name, const Scenario& scenario) {
  const SearchSettings settings = settings_for(scenario);
  const Ruled rule = best_rule(scenario, settings);
  const auto start = std::chrono::steady_clock::now();
  const auto found = search_gains(scenario, settings);
  const double ms = 1e3 * std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count();
  if (!found) {
    std::printf("%-18s %s\n", name.c_str(), text_of(found.error()).c_str());
    return false;
  }
  const bool beaten = rule.name && better(worth_of(rule.candidate), worth_of(found->best));
  std::printf("%-18s %-14s %-14s %-28s %-14s %8.0f  %s%s\n", name.c_str(), deviation_text(found->own).c_str(),
              rule.name ? deviation_text(rule.candidate).c_str() : "-", rule.name ? rule.name : "none",
              deviation_text(found->best).c_str(), ms, found->stops_it.c_str(),
              beaten ? "  beaten by the rule" : "");
  return beaten;
}

}  // namespace

int print_search_table() {
  std::printf("%-18s %-14s %-14s %-28s %-14s %8s  %s\n", "largest deviation", "as it stands", "best rule", "",
              "search", "ms", "limit that stops it");
  int beaten = 0;
  for (const std::string& file : scenario_files()) {
    const auto scenario = read_file(file);
    if (scenario) beaten += print_row(std::filesystem::path(file).stem().string(), *scenario) ? 1 : 0;
  }
  std::printf("(!) breaks a limit: gain margin 6 dB, and the scenario's own on saturation and reversals\n");
  return beaten;
}

}  // namespace lw::benchmark
