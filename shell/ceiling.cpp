#include "engine/stress/ceiling.h"

#include <algorithm>

#include "engine/scenario/fields.h"
#include "engine/tuning/kinds.h"
#include "shell/commands.h"
#include "shell/driven.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

/// One choice and how fast it goes.
struct Climbed {
  std::string kind;  // "own", or the name of a kind
  Ceiling ceiling;
  std::string note;  // what is odd about the choice; may be empty
};

Json json_of(const Rung& rung) {
  Json json;
  json["base_pct"] = rung.base_pct;
  json["finished"] = rung.finished();
  json["outcome"] = rung.driven ? Json(name_of(rung.summary.outcome)) : Json(nullptr);
  json["time_s"] = rung.driven ? Json(rung.summary.time) : Json(nullptr);
  json["mean_speed_mm_s"] = rung.driven ? Json(1e3 * rung.summary.mean_speed) : Json(nullptr);
  json["deviation_max_mm"] = rung.driven ? Json(1e3 * rung.summary.deviation_max) : Json(nullptr);
  json["saturated_pct"] = rung.driven ? Json(1e2 * rung.summary.saturated) : Json(nullptr);
  json["kp"] = rung.driven ? Json(rung.controller.kp) : Json(nullptr);
  json["ki"] = rung.driven ? Json(rung.controller.ki) : Json(nullptr);
  json["kd"] = rung.driven ? Json(rung.controller.kd) : Json(nullptr);
  json["reason"] = rung.reason;
  return json;
}

Json limit_json(const Ceiling& ceiling) {
  const Rung* beyond = ceiling.first_beyond();
  if (!beyond) return nullptr;
  Json json;
  json["base_pct"] = beyond->base_pct;
  json["reason"] = beyond->reason;
  json["why"] = beyond->loss ? Json(beyond->loss->why) : Json(nullptr);
  json["where"] = beyond->loss ? Json(beyond->loss->where) : Json(nullptr);
  json["from_mm"] = beyond->loss ? Json(1e3 * beyond->loss->from) : Json(nullptr);
  return json;
}

Json json_of(const Climbed& climbed) {
  const Ceiling& ceiling = climbed.ceiling;
  const auto percent = [](const std::optional<double>& value) {
    return value ? Json(*value) : Json(nullptr);
  };
  Json json;
  json["kind"] = climbed.kind;
  json["base_pct"] = percent(ceiling.base_pct);
  json["speed_mm_s"] = ceiling.base_pct ? Json(1e3 * ceiling.speed) : Json(nullptr);
  json["limit"] = limit_json(ceiling);
  json["finishes_again_pct"] = percent(ceiling.again_pct);
  json["slowest_pct"] = percent(ceiling.slowest_pct);
  json["summary"] = in_words(ceiling);
  json["note"] = climbed.note;
  json["steps"] = Json::array();
  for (const Rung& rung : ceiling.steps) json["steps"].push_back(json_of(rung));
  return json;
}

std::string note_of(const Controller& controller, Kind kind, bool retune) {
  if (retune || covers(controller, kind)) return "";
  std::string missing = has_integral(kind) && controller.ki == 0.0 ? "ki" : "";
  if (has_derivative(kind) && controller.kd == 0.0) missing += missing.empty() ? "kd" : " and kd";
  return "the scenario's " + missing + (missing.size() > 2 ? " are" : " is") +
         " 0: set a gain, or ask for --retune";
}

Result<Climbed> climbed_as(const Scenario& scenario, const std::string& name, std::optional<Kind> kind,
                           bool retune, const std::shared_ptr<const Ground>& ground) {
  Choice choice = own_choice(scenario);
  Climbed climbed{name, {}, ""};
  if (kind) {
    Scenario of = scenario;
    of.controller = of_kind(scenario.controller, *kind);
    choice = own_choice(of);
    climbed.note = note_of(scenario.controller, *kind, retune);
    if (retune) choice = [&scenario, kind](double base_pct) { return retuned(scenario, *kind, base_pct); };
  }
  auto ceiling = find_ceiling(scenario, choice, {}, ground);
  if (!ceiling) return ceiling.error();
  climbed.ceiling = std::move(*ceiling);
  return climbed;
}

/// "P,PI" as kinds; nothing for a word that is none.
std::optional<std::vector<Kind>> kinds_of(const std::vector<std::string>& words) {
  std::vector<Kind> kinds;
  for (const std::string& word : words) {
    const auto* found = std::find(std::begin(kind_names), std::end(kind_names), word);
    if (found == std::end(kind_names)) return {};
    kinds.push_back(static_cast<Kind>(found - std::begin(kind_names)));
  }
  return kinds;
}

std::string text_for_people(const Scenario& scenario, const std::vector<Climbed>& all) {
  std::string text = scenario.title.empty() ? "" : scenario.title + '\n';
  std::vector<std::vector<std::string>> rows{{"", "base", "speed", "lap", "deviation max", "what ends it"}};
  for (const Climbed& climbed : all) {
    const Rung* last = climbed.ceiling.last();
    const Rung* beyond = climbed.ceiling.first_beyond();
    if (!last) {
      rows.push_back({climbed.kind, "none", "", "", "", ""});
      continue;
    }
    rows.push_back({climbed.kind, fixed(last->base_pct, 2) + " %",
                    fixed(1e3 * climbed.ceiling.speed, 0) + " mm/s", fixed(last->summary.time, 2) + " s",
                    fixed(1e3 * last->summary.deviation_max, 1) + " mm",
                    beyond ? beyond->reason : "the vehicle's own top speed"});
  }
  text += table(rows);
  std::vector<std::string> said;
  for (const Climbed& climbed : all) {
    const std::string words = in_words(climbed.ceiling);
    const bool again = std::find(said.begin(), said.end(), words) != said.end();
    if (!again) text += '\n' + climbed.kind + ": " + words + '\n';
    if (!climbed.note.empty()) text += (again ? climbed.kind + ": " : "  ") + climbed.note + '\n';
    said.push_back(words);
  }
  return text;
}

}  // namespace

Answer ceiling_command(const CeilingCall& call) {
  const auto kinds = kinds_of(call.kinds);
  if (!kinds) return refused({"--kind", "", "each is one of P, PI, PD, PID, separated by commas"});
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const auto plan = plan_of(*loaded);
  if (!plan) return refused(plan.error());

  std::vector<Climbed> all;
  const auto add = [&](const std::string& name, std::optional<Kind> kind) {
    auto climbed = climbed_as(loaded->scenario, name, kind, call.retune, plan->ground);
    if (climbed) all.push_back(std::move(*climbed));
    return climbed.ok() ? std::optional<Error>() : climbed.error();
  };
  if (kinds->empty() && !call.retune) {
    if (const auto error = add("own", {})) return refused(*error);
  }
  const bool every = kinds->empty();
  for (const Kind kind : all_kinds) {
    const bool wanted = every || std::find(kinds->begin(), kinds->end(), kind) != kinds->end();
    if (!wanted) continue;
    if (const auto error = add(std::string(name_of(kind)), kind)) return refused(*error);
  }
  Answer answer;
  answer.json = json_of(all.front());
  answer.json["kinds"] = Json::array();
  for (const Climbed& climbed : all) answer.json["kinds"].push_back(json_of(climbed));
  answer.text = text_for_people(loaded->scenario, all);
  return answer;
}

}  // namespace lw::shell
