#include <cmath>

#include "engine/numeric/functions.h"
#include "engine/theory/margins.h"
#include "engine/theory/poles.h"
#include "shell/commands.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

constexpr double degrees = 180.0 / pi;
constexpr std::size_t most_listed = 12;  // poles, for people; JSON has all

/// Everything the command works out.
struct LoopFigures {
  SampledLoop loop;
  Margins margins;
  Critical critical;
  SpeedLimit limit;
  std::vector<std::complex<double>> poles;
};

Json or_null(std::optional<double> value, double scale = 1.0) {
  return value && std::isfinite(*value) ? Json(*value * scale) : Json(nullptr);
}

Json or_null_db(std::optional<double> factor) { return factor ? Json(decibels(*factor)) : Json(nullptr); }

std::vector<std::string> notes_of(const LoopFigures& figures) {
  std::vector<std::string> notes = figures.loop.notes;
  if (figures.poles.empty())
    notes.push_back("A command waits for so many periods that the poles are not listed (more than " +
                    std::to_string(most_poles) + ").");
  return notes;
}

Json json_of(const LoopFigures& figures) {
  const Margins& margins = figures.margins;
  Json json;
  json["critical_gain"] = or_null(figures.critical.gain);
  json["critical_period_s"] = or_null(figures.critical.period);
  json["gain_margin_db"] = or_null_db(margins.gain_high);
  json["gain_margin_low_db"] = or_null_db(margins.gain_low);
  json["phase_margin_deg"] = or_null(margins.phase, degrees);
  json["delay_margin_ms"] = or_null(margins.delay, 1e3);
  json["sensitivity_peak"] = or_null(margins.sensitivity_peak);
  json["stable"] = margins.stable;
  json["poles"] = Json::array();
  for (const auto& pole : figures.poles) json["poles"].push_back({pole.real(), pole.imag()});
  json["critical_gain_low"] = or_null(figures.critical.low_gain);
  json["speed_mm_s"] = 1e3 * figures.loop.speed;
  json["error_per_mm"] = 1e-3 * figures.loop.slope;
  json["lead_ms"] = 1e3 * figures.limit.lead;
  json["late_ms"] = 1e3 * figures.limit.late;
  json["p_alone_speed_limit_mm_s"] = or_null(figures.limit.speed, 1e3);
  json["p_alone_base_limit_pct"] = or_null(figures.limit.base, 1e2);
  json["summary"] = in_words(figures.limit, figures.loop);
  json["notes"] = notes_of(figures);
  return json;
}

std::string hertz(double omega) { return brief(omega / (2.0 * pi), 3) + " Hz"; }

std::string gain_text(std::optional<double> factor, double omega, const char* none) {
  if (!factor) return none;
  return fixed(decibels(*factor), 2) + " dB (times " + brief(*factor, 4) + "), swings at " + hertz(omega);
}

std::string unit_of_gain(const Scenario& scenario) {
  return scenario.sensors.scheme == Scheme::bar ? " per mm of error" : "";
}

std::vector<std::vector<std::string>> margin_rows(const LoopFigures& figures, const Scenario& scenario) {
  const Margins& margins = figures.margins;
  const Critical& critical = figures.critical;
  const bool bar = scenario.sensors.scheme == Scheme::bar;
  std::vector<std::vector<std::string>> rows{
      {"stable", margins.stable ? "yes" : "no"},
      {"critical gain of P alone",
       critical.gain ? "Kp " + brief(*critical.gain, 5) + unit_of_gain(scenario) : "none"},
      {"critical period", critical.period ? fixed(1e3 * *critical.period, 2) + " ms" : "none"},
  };
  if (critical.low_gain) rows.push_back({"P alone swings up below", "Kp " + brief(*critical.low_gain, 5)});
  rows.insert(rows.end(),
              {{"gain margin up", gain_text(margins.gain_high, margins.gain_high_omega, "none")},
               {"gain margin down", gain_text(margins.gain_low, margins.gain_low_omega, "no lower end")},
               {"phase margin",
                margins.phase ? fixed(*margins.phase * degrees, 2) + " deg at " + hertz(margins.phase_omega)
                              : "none"},
               {"delay margin", margins.delay ? fixed(1e3 * *margins.delay, 2) + " ms" : "none"},
               {"sensitivity peak", margins.sensitivity_peak ? fixed(*margins.sensitivity_peak, 3) + " at " +
                                                                   hertz(margins.sensitivity_omega)
                                                             : "none"},
               {"base speed", fixed(1e3 * figures.loop.speed, 1) + " mm/s"},
               {"error per mm of deviation", bar ? fixed(1e-3 * figures.loop.slope, 4) + " mm"
                                                 : fixed(0.1 * figures.loop.slope, 3) + " % of full scale"},
               {"delay in all", fixed(1e3 * figures.loop.delay, 2) + " ms"}});
  return rows;
}

std::string poles_text(const LoopFigures& figures) {
  std::vector<std::vector<std::string>> rows{{"pole z", "", "|z|", "damping", "natural", "time constant"}};
  std::size_t listed = 0;
  for (const auto& pole : figures.poles) {
    if (pole.imag() < 0.0 || std::abs(pole) < 1e-9 || ++listed > most_listed) continue;
    const PoleMotion motion = motion_of(pole, figures.loop.period);
    rows.push_back({fixed(pole.real(), 5), pole.imag() == 0.0 ? "" : "+- " + fixed(pole.imag(), 5) + " j",
                    fixed(std::abs(pole), 5), fixed(motion.damping, 3), hertz(motion.frequency),
                    brief(1e3 * motion.time_constant, 4) + " ms"});
  }
  return table(rows);
}

std::string text_for_people(const LoopFigures& figures, const Scenario& scenario) {
  std::string text = scenario.title.empty() ? "" : scenario.title + '\n';
  text += in_words(figures.limit, figures.loop) + "\n\n" + table(margin_rows(figures, scenario));
  if (!figures.poles.empty()) text += "\nPoles of the closed loop, slowest first\n" + poles_text(figures);
  const std::vector<std::string> notes = notes_of(figures);
  if (!notes.empty()) text += "\nLinear figures, around the straight\n";
  for (const std::string& note : notes) text += "  " + note + '\n';
  return text;
}

}  // namespace

Answer loop_command(const LoopCall& call) {
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const auto loop = linearise(loaded->scenario);
  if (!loop) {
    Error error = loop.error();
    error.where = error.where.empty() ? loaded->name : loaded->name + ": " + error.where;
    return refused(std::move(error));
  }
  const LoopFigures figures{*loop, margins(*loop), critical(*loop), speed_limit(*loop), poles(*loop)};
  Answer answer;
  answer.json = json_of(figures);
  answer.text = text_for_people(figures, loaded->scenario);
  return answer;
}

}  // namespace lw::shell
