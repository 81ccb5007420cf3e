#include "engine/tuning/tune.h"

#include <cmath>

#include "engine/numeric/functions.h"
#include "engine/scenario/fields.h"
#include "engine/tuning/rules.h"
#include "shell/commands.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

Json or_null(std::optional<double> value, double scale = 1.0) {
  return value && std::isfinite(*value) ? Json(*value * scale) : Json(nullptr);
}

Json or_null_db(std::optional<double> factor) { return factor ? Json(decibels(*factor)) : Json(nullptr); }

Json json_of(const LoopGains& gains) { return {{"kp", gains.kp}, {"ki", gains.ki}, {"kd", gains.kd}}; }
Json json_of(const SecondGains& gains) { return {{"kp", gains.kp}, {"ki", gains.ki}, {"kd", gains.kd}}; }

Json json_of(const Critical& theory) {
  return {{"critical_gain", or_null(theory.gain)},
          {"critical_period_s", or_null(theory.period)},
          {"reason", theory.reason}};
}

Json json_of(const CriticalFound& found, const char* gain = "critical_gain") {
  return {{gain, or_null(found.gain)},
          {"period_s", found.gain ? Json(found.period) : Json(nullptr)},
          {"swing_mm", 1e3 * found.amplitude},
          {"steer_pct", 1e2 * found.steer_amplitude},
          {"limited_pct", 1e2 * found.limited},
          {"scatter_pct", 1e2 * found.scatter},
          {"trials", found.trials},
          {"reason", found.reason}};
}

Json json_of(const CriticalStudy& study) {
  Json json{{"ideal", json_of(study.ideal)},
            {"ideal_difference_pct", 1e2 * study.ideal_change},
            {"slope_left_pct", 1e2 * study.slope_left},
            {"as_it_is", json_of(study.as_it_is)},
            {"as_it_is_difference_pct", 1e2 * study.as_it_is_change}};
  json["effects"] = Json::array();
  for (const EffectFound& one : study.alone) {
    Json entry = json_of(one.found);
    entry["effect"] = one.name;
    entry["change_pct"] = 1e2 * one.change;
    json["effects"].push_back(entry);
  }
  json["larger_swings"] = Json::array();
  for (const LargerSwing& larger : study.larger) {
    Json entry = json_of(larger.found);
    entry["kept_up"] = larger.kept_up;
    entry["slope_left_pct"] = 1e2 * larger.slope_left;
    json["larger_swings"].push_back(entry);
  }
  return json;
}

Json json_of(const RelayFound& found) {
  const std::optional<RelayReading>& reading = found.reading;
  return {{"critical_gain", reading ? Json(reading->gain) : Json(nullptr)},
          {"period_s", reading ? Json(reading->period) : Json(nullptr)},
          {"error_amplitude", reading ? Json(reading->amplitude) : Json(nullptr)},
          {"late_deg", reading ? Json(reading->late * 180.0 / pi) : Json(nullptr)},
          {"relay_pct", 1e2 * found.size},
          {"hysteresis", found.hysteresis},
          {"swing_mm", 1e3 * found.amplitude},
          {"reason", found.reason}};
}

Json json_of(const RelayStudy& study) {
  return {{"ideal", json_of(study.ideal)},
          {"as_it_is", json_of(study.as_it_is)},
          {"by_frequency_pct", 1e2 * (study.parts.frequency - 1.0)},
          {"by_slope_pct", 1e2 * (study.parts.slope - 1.0)},
          {"by_formula_pct", 1e2 * (study.parts.formula - 1.0)}};
}

Json json_of(const Trial& trial, double period) {
  const Margins& margins = trial.margins;
  return {{"name", trial.name},
          {"source", trial.source},
          {"per_loop", json_of(trial.gains)},
          {"per_second", json_of(per_second(trial.gains, period))},
          {"filter_ms", 1e3 * trial.filter},
          {"stable", margins.stable},
          {"gain_margin_db", or_null_db(margins.gain_high)},
          {"gain_margin_low_db", or_null_db(margins.gain_low)},
          {"phase_margin_deg", or_null(margins.phase, 180.0 / pi)},
          {"delay_margin_ms", or_null(margins.delay, 1e3)},
          {"sensitivity_peak", or_null(margins.sensitivity_peak)},
          {"outcome", name_of(trial.drive.outcome)},
          {"time_s", trial.drive.time},
          {"deviation_rms_mm", 1e3 * trial.drive.deviation_rms},
          {"deviation_max_mm", 1e3 * trial.drive.deviation_max},
          {"reversals_per_s", trial.drive.reversals_per_s},
          {"saturated_pct", 1e2 * trial.drive.saturated},
          {"drive", trial.how_it_went},
          {"against", trial.against},
          {"near_the_edge", trial.near_edge}};
}

/// What there is to say about the experiments, a sentence each.
std::vector<std::string> words_of(const Tuning& tuning) {
  if (tuning.study) return tuning.study->words;
  if (tuning.relay) return tuning.relay->words;
  std::vector<std::string> words;
  if (tuning.floor && tuning.floor->gain && tuning.theory.gain)
    words.push_back("On the straight a swing of " + brief(1e3 * tuning.floor->amplitude, 3) +
                    " mm without rounding, noise or jitter keeps on at Kp " + brief(*tuning.floor->gain, 4) +
                    ", " + fixed(1e2 * (*tuning.floor->gain / *tuning.theory.gain - 1.0), 1) +
                    " % from theory; --method critical tells why.");
  if (tuning.floor && !tuning.floor->gain)
    words.push_back("On the straight no critical gain is found: " + tuning.floor->reason + ".");
  if (tuning.integral) {
    const IntegralLimit& limit = *tuning.integral;
    words.push_back("Beside Kp " + brief(limit.kp, 4) + " the straight is no longer held from Ki " +
                    (limit.theory ? brief(*limit.theory, 4) : "none") + " per loop by theory and " +
                    (limit.experiment.gain ? brief(*limit.experiment.gain, 4) : "none") + " by experiment" +
                    (limit.experiment.limited > 0.0 ? ", the latter with commands at their limits." : "."));
  }
  return words;
}

Json json_of(const Tuning& tuning, const Scenario& scenario) {
  const double period = 1e-3 * scenario.loop.period_ms;
  const Trial* best = tuning.choice.index ? &tuning.trials[*tuning.choice.index] : nullptr;
  const bool seconds = scenario.controller.gains == GainUnit::per_second;
  Json gains = Json::object();
  if (best) gains = seconds ? json_of(per_second(best->gains, period)) : json_of(best->gains);
  Json json{{"method", tune_methods[static_cast<int>(tuning.method)]},
            {"kp", best ? gains["kp"] : Json(nullptr)},
            {"ki", best ? gains["ki"] : Json(nullptr)},
            {"kd", best ? gains["kd"] : Json(nullptr)},
            {"filter", best ? Json(1e3 * best->filter) : Json(nullptr)}};
  Json evidence{
      {"gains", seconds ? "per_second" : "per_loop"},
      {"setting", best ? Json(best->name) : Json(nullptr)},
      {"reason", tuning.choice.reason},
      {"critical_gain", tuning.critical_gain > 0.0 ? Json(tuning.critical_gain) : Json(nullptr)},
      {"critical_period_s", tuning.critical_gain > 0.0 ? Json(tuning.critical_period) : Json(nullptr)},
      {"from", tuning.from},
      {"theory", json_of(tuning.theory)}};
  if (tuning.floor) evidence["experiment"] = json_of(*tuning.floor);
  if (tuning.study) evidence["experiment"] = json_of(*tuning.study);
  if (tuning.relay) evidence["relay"] = json_of(*tuning.relay);
  if (tuning.integral)
    evidence["integral"] = {{"kp", tuning.integral->kp},
                            {"theory_ki_per_loop", or_null(tuning.integral->theory)},
                            {"experiment", json_of(tuning.integral->experiment, "ki_per_loop")}};
  evidence["words"] = words_of(tuning);
  evidence["settings"] = Json::array();
  for (const Trial& trial : tuning.trials) evidence["settings"].push_back(json_of(trial, period));
  json["evidence"] = std::move(evidence);
  return json;
}

std::string gain_cell(double loop, double second) {
  return loop == 0.0 ? "-" : brief(loop, 3) + " | " + brief(second, 3);
}

std::vector<std::string> row_of(const Trial& trial, double period, bool best) {
  const Margins& margins = trial.margins;
  const SecondGains seconds = per_second(trial.gains, period);
  const bool finished = trial.drive.outcome == Outcome::finished;
  return {(best ? "> " : "  ") + trial.name,
          brief(trial.gains.kp, 4),
          gain_cell(trial.gains.ki, seconds.ki),
          gain_cell(trial.gains.kd, seconds.kd),
          margins.stable ? "yes" : "NO",
          margins.gain_high ? fixed(decibels(*margins.gain_high), 1) : "-",
          margins.phase ? fixed(*margins.phase * 180.0 / pi, 0) : "-",
          margins.sensitivity_peak ? fixed(*margins.sensitivity_peak, 2) : "-",
          finished ? fixed(trial.drive.time, 2) : std::string(name_of(trial.drive.outcome)),
          fixed(1e3 * trial.drive.deviation_rms, 2),
          fixed(1e3 * trial.drive.deviation_max, 2),
          fixed(trial.drive.reversals_per_s, 1),
          fixed(1e2 * trial.drive.saturated, 0)};
}

std::string trials_text(const Tuning& tuning, double period) {
  std::vector<std::vector<std::string>> rows{{"  setting", "Kp", "Ki loop | s", "Kd loop | s", "stable",
                                              "margin dB", "phase deg", "peak", "time s", "rms mm", "max mm",
                                              "turns/s", "limit %"}};
  for (std::size_t i = 0; i < tuning.trials.size(); ++i)
    rows.push_back(row_of(tuning.trials[i], period, tuning.choice.index == i));
  std::string text = table(rows);
  text +=
      "\nKi and Kd per loop | per second. stable to peak: the linear loop on the straight (peak: of the "
      "sensitivity).\ntime to limit: one drive on this course; turns: changes of the side of steer; limit: "
      "share of loops with a command at its limit.\n";
  std::string against;
  for (const Trial& trial : tuning.trials) {
    if (!trial.against.empty()) against += "  " + trial.name + ": " + trial.against + '\n';
  }
  if (!against.empty()) text += "\nContradicted, and never recommended\n" + against;
  text += "\nSources\n";
  std::string before;
  for (const Trial& trial : tuning.trials) {
    if (trial.source == before) continue;
    before = trial.source;
    text += "  " + trial.name + ": " + trial.source + '\n';
  }
  return text;
}

std::string chosen_text(const Tuning& tuning, const Scenario& scenario) {
  if (!tuning.choice.index) return "";
  const Trial& best = tuning.trials[*tuning.choice.index];
  const SecondGains seconds = per_second(best.gains, 1e-3 * scenario.loop.period_ms);
  const auto line = [](const LoopGains& gains) {
    return "Kp " + brief(gains.kp, 5) + "  Ki " + brief(gains.ki, 5) + "  Kd " + brief(gains.kd, 5);
  };
  std::vector<std::vector<std::string>> rows{{"per loop", line(best.gains)},
                                             {"per second", line({seconds.kp, seconds.ki, seconds.kd})}};
  if (best.gains.kd != 0.0) rows.push_back({"filter of D", fixed(1e3 * best.filter, 2) + " ms"});
  return '\n' + table(rows);
}

std::string text_for_people(const Tuning& tuning, const Scenario& scenario) {
  std::string text = scenario.title.empty() ? "" : scenario.title + '\n';
  text += tuning.choice.reason + '\n' + chosen_text(tuning, scenario);
  if (tuning.critical_gain > 0.0)
    text += "\nWorked out from critical gain Kp " + brief(tuning.critical_gain, 5) +
            (scenario.sensors.scheme == Scheme::bar ? " per mm of error" : "") + " and critical period " +
            fixed(1e3 * tuning.critical_period, 2) + " ms, by " + tuning.from + ".\n";
  for (const std::string& sentence : words_of(tuning)) text += "  " + sentence + '\n';
  if (!tuning.trials.empty()) text += '\n' + trials_text(tuning, 1e-3 * scenario.loop.period_ms);
  return text;
}

}  // namespace

Answer tune_command(const TuneCall& call) {
  if (call.method == "search") {
    SearchCall search = call.search;
    search.input = call.input;
    return search_command(search);
  }
  const auto method = tune_method_of(call.method);
  if (!method)
    return refused({"--method", call.method, "it is one of rules, critical, relay, habit, search"});
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const auto tuning = tune(loaded->scenario, *method);
  if (!tuning) {
    Error error = tuning.error();
    error.where = error.where.empty() ? loaded->name : loaded->name + ": " + error.where;
    return refused(std::move(error));
  }
  Answer answer;
  answer.json = json_of(*tuning, loaded->scenario);
  answer.text = text_for_people(*tuning, loaded->scenario);
  return answer;
}

}  // namespace lw::shell
