#include "engine/tuning/search.h"

#include <algorithm>
#include <cstdlib>

#include "engine/scenario/fields.h"
#include "engine/scenario/value_text.h"
#include "shell/commands.h"
#include "shell/driven.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

constexpr std::size_t most_listed = 12;  // of the front, for people; JSON has all

std::optional<double> number_of(const std::string& text) {
  char* end = nullptr;
  const double value = std::strtod(text.c_str(), &end);
  if (text.empty() || *end != '\0') return {};
  return value;
}

/// "kp" or "kp=0.1:0.8".
Result<FreeVariable> free_of(const std::string& word) {
  const std::size_t equals = word.find('=');
  const std::string name = word.substr(0, equals);
  const auto* found = std::find(std::begin(variable_names), std::end(variable_names), name);
  if (found == std::end(variable_names))
    return Error{"--free", clipped(name), "one of kp, ki, kd, filter, base, forward, spacing"};
  FreeVariable free{static_cast<Variable>(found - std::begin(variable_names)), {}, {}};
  if (equals == std::string::npos) return free;
  const std::string bounds = word.substr(equals + 1);
  const std::size_t colon = bounds.find(':');
  free.low = number_of(bounds.substr(0, colon));
  if (colon != std::string::npos) free.high = number_of(bounds.substr(colon + 1));
  if (!free.low || !free.high)
    return Error{"--free", clipped(word), "bounds are LOW:HIGH, such as kp=0.1:0.8"};
  return free;
}

/// "deviation_mm=3".
std::optional<Error> set_limit(const std::string& word, SearchLimits& limits) {
  const struct {
    const char* name;
    std::optional<double>& limit;
  } known[] = {{"deviation_mm", limits.deviation_mm},       {"deviation_rms_mm", limits.deviation_rms_mm},
               {"reversals_per_s", limits.reversals_per_s}, {"saturated_pct", limits.saturated_pct},
               {"gain_margin_db", limits.gain_margin_db},   {"sensitivity_peak", limits.sensitivity_peak}};
  const std::size_t equals = word.find('=');
  const auto value = equals == std::string::npos ? std::nullopt : number_of(word.substr(equals + 1));
  std::string names;
  for (const auto& one : known) {
    names += (names.empty() ? "" : ", ") + std::string(one.name);
    if (word.substr(0, equals) != one.name) continue;
    if (!value || !(*value >= 0.0))
      return Error{"--limit", clipped(word), "NAME=VALUE with a number from 0 on"};
    one.limit = value;
    return {};
  }
  return Error{"--limit", clipped(word), "NAME=VALUE with one of " + names};
}

/// "kp,ki" as "kp", "ki".
std::vector<std::string> apart(const std::vector<std::string>& words) {
  std::vector<std::string> all;
  for (const std::string& word : words) {
    std::size_t from = 0;
    for (std::size_t comma = 0; comma != std::string::npos; from = comma + 1) {
      comma = word.find(',', from);
      all.push_back(word.substr(from, comma == std::string::npos ? comma : comma - from));
    }
  }
  return all;
}

Result<SearchSettings> settings_of(const SearchCall& call) {
  SearchSettings settings;
  for (const std::string& word : apart(call.free)) {
    const auto free = free_of(word);
    if (!free) return free.error();
    settings.free.push_back(*free);
  }
  for (const std::string& word : apart(call.limits)) {
    if (const auto error = set_limit(word, settings.limits)) return *error;
  }
  if (call.goal != "time" && call.goal != "deviation")
    return Error{"--goal", clipped(call.goal), "time or deviation"};
  settings.goal = call.goal == "time" ? Goal::time : Goal::deviation;
  settings.evaluations = call.evaluations;
  settings.draws = call.draws;
  settings.seed = call.seed;
  return settings;
}

/// What to give --set to drive a candidate.
std::vector<std::string> set_words(const Scenario& scenario, const std::vector<FreeVariable>& free) {
  std::vector<std::string> words;
  const auto add = [&](const std::string& key, double value) {
    words.push_back(key + '=' + number_text(value));
  };
  for (const FreeVariable& one : free) {
    switch (one.variable) {
      case Variable::kp:
        add("controller.kp", scenario.controller.kp);
        break;
      case Variable::ki:
        add("controller.ki", scenario.controller.ki);
        break;
      case Variable::kd:
        add("controller.kd", scenario.controller.kd);
        break;
      case Variable::filter:
        add("controller.derivative_filter_ms", scenario.controller.derivative_filter_ms);
        break;
      case Variable::base:
        add("controller.base_pct", scenario.controller.base_pct);
        break;
      case Variable::forward:
        add("sensors.forward_mm", scenario.sensors.forward_mm);
        break;
      case Variable::spacing:
        for (std::size_t i = 0; i < scenario.sensors.lateral_mm.size(); ++i)
          add("sensors.lateral_mm[" + std::to_string(i) + ']', scenario.sensors.lateral_mm[i]);
        break;
    }
  }
  return words;
}

Json json_of(const Candidate& candidate, const SearchSettings& settings, bool with_margins) {
  const auto or_null = [](const std::optional<double>& value) {
    return value ? Json(*value) : Json(nullptr);
  };
  Json json;
  for (std::size_t i = 0; i < settings.free.size(); ++i)
    json["values"][std::string(name_of(settings.free[i].variable))] = candidate.values[i];
  json["finished"] = candidate.finished;
  json["time_s"] = candidate.time;
  json["deviation_max_mm"] = 1e3 * candidate.deviation_max;
  json["deviation_rms_mm"] = 1e3 * candidate.deviation_rms;
  json["reversals_per_s"] = candidate.reversals_per_s;
  json["saturated_pct"] = 1e2 * candidate.saturated;
  json["keeps_limits"] = candidate.breach == 0.0;
  if (!with_margins) return json;
  json["stable"] = candidate.stable;
  json["gain_margin_db"] = or_null(candidate.gain_high_db);
  json["gain_margin_low_db"] = or_null(candidate.gain_low_db);
  json["sensitivity_peak"] = or_null(candidate.sensitivity_peak);
  return json;
}

Json json_of(const SearchAnswer& found, const SearchSettings& settings) {
  const Controller& controller = found.scenario.controller;
  Json evidence;
  evidence["gains"] = name_of(controller.gains);
  evidence["words"] = Json::array({found.words});
  evidence["stops_it"] = found.stops_it;
  evidence["set"] = set_words(found.scenario, settings.free);
  evidence["best"] = json_of(found.best, settings, true);
  evidence["own"] = json_of(found.own, settings, true);
  evidence["evaluations"] = found.evaluations;
  evidence["front"] = Json::array();
  for (const Candidate& candidate : found.front)
    evidence["front"].push_back(json_of(candidate, settings, false));
  return {{"method", "search"},
          {"kp", controller.kp},
          {"ki", controller.ki},
          {"kd", controller.kd},
          {"filter", controller.derivative_filter_ms},
          {"evidence", evidence}};
}

std::vector<std::string> row_of(const std::string& name, const Candidate& candidate) {
  std::vector<std::string> row{name};
  for (const double value : candidate.values) row.push_back(brief(value));
  row.insert(row.end(), {fixed(candidate.time, 2), fixed(1e3 * candidate.deviation_max, 2),
                         fixed(1e3 * candidate.deviation_rms, 2), fixed(candidate.reversals_per_s, 1),
                         fixed(1e2 * candidate.saturated, 0), candidate.breach == 0.0 ? "yes" : "no"});
  return row;
}

std::string text_for_people(const Scenario& scenario, const SearchAnswer& found,
                            const SearchSettings& settings) {
  std::vector<std::string> head{""};
  for (const FreeVariable& one : settings.free) head.push_back(std::string(name_of(one.variable)));
  head.insert(head.end(), {"time s", "max mm", "rms mm", "turns/s", "limit %", "keeps limits"});
  std::vector<std::vector<std::string>> rows{head, row_of("as it stands", found.own),
                                             row_of("best", found.best)};
  std::string text = scenario.title.empty() ? "" : scenario.title + '\n';
  text += found.words + "\n\n" + table(rows);
  if (found.front.size() > 1) {
    rows = {head};
    const std::size_t listed = std::min(most_listed, found.front.size());
    for (std::size_t i = 0; i < listed; ++i)
      rows.push_back(row_of("", found.front[i * (found.front.size() - 1) / (listed - 1)]));
    text += "\nTime against deviation: none of these is beaten in both\n" + table(rows);
  }
  text += "\nTo drive it:";
  for (const std::string& word : set_words(found.scenario, settings.free)) text += " --set " + word;
  return text + '\n';
}

}  // namespace

Answer search_command(const SearchCall& call) {
  auto settings = settings_of(call);
  if (!settings) return refused(settings.error());
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const auto plan = plan_of(*loaded);
  if (!plan) return refused(plan.error());
  settings->starts = rule_starts(loaded->scenario, settings->free);
  const auto found = search_gains(loaded->scenario, *settings, {}, plan->ground);
  if (!found) return refused(found.error());
  Answer answer;
  answer.json = json_of(*found, *settings);
  answer.text = text_for_people(loaded->scenario, *found, *settings);
  return answer;
}

}  // namespace lw::shell
