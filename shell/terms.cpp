#include <cmath>

#include "engine/numeric/functions.h"
#include "engine/scenario/fields.h"
#include "engine/tuning/derivative.h"
#include "engine/tuning/integral.h"
#include "shell/commands.h"
#include "shell/driven.h"
#include "shell/table.h"

namespace lw::shell {
namespace {

constexpr double degrees = 180.0 / pi;

Json or_null(const std::optional<double>& value, double scale = 1.0) {
  return value && std::isfinite(*value) ? Json(*value * scale) : Json(nullptr);
}

// ---- integral -----------------------------------------------------------------------------------------

Json json_of(const Margins& margins) {
  Json json;
  json["stable"] = margins.stable;
  json["gain_margin_db"] = margins.gain_high ? Json(decibels(*margins.gain_high)) : Json(nullptr);
  json["phase_margin_deg"] = or_null(margins.phase, degrees);
  json["sensitivity_peak"] = or_null(margins.sensitivity_peak);
  return json;
}

Json json_of(const BendFigures& bend) {
  Json json;
  json["radius_mm"] = or_null(bend.radius, 1e3);  // null = straight
  json["side"] = std::isfinite(bend.radius) ? Json(bend.left ? "left" : "right") : Json(nullptr);
  json["count"] = bend.count;
  json["length_mm"] = 1e3 * bend.length;
  json["error"] = bend.held ? Json(bend.held->error) : Json(nullptr);
  json["deviation_mm"] = bend.held ? Json(1e3 * bend.held->deviation) : Json(nullptr);
  json["steer"] = bend.held ? Json(bend.held->steer) : Json(nullptr);
  json["rough_error"] = bend.rough_error;
  json["losing_base_pct"] = bend.losing_base < 1.0 ? Json(1e2 * bend.losing_base) : Json(nullptr);
  json["losing_speed_mm_s"] = bend.losing_base < 1.0 ? Json(1e3 * bend.losing_speed) : Json(nullptr);
  json["duration_s"] = or_null(bend.duration);
  json["integral_in_time"] = bend.integral_in_time;
  return json;
}

Json json_of(const IntegralFigures& found) {
  Json json;
  json["summary"] = found.words;
  json["time_ms"] = or_null(found.time, 1e3);
  json["ki_per_loop"] = found.tried_ki;
  json["tried"] = found.tried;
  json["with"] = json_of(found.with);
  json["without"] = json_of(found.without);
  json["bends"] = Json::array();
  for (const BendFigures& bend : found.bends) json["bends"].push_back(json_of(bend));
  return json;
}

std::string bends_text(const IntegralFigures& found, bool bar) {
  std::vector<std::vector<std::string>> rows{
      {"section", "", "error of P", "deviation", "steer", "P alone loses it above", "time in it"}};
  for (const BendFigures& bend : found.bends) {
    const bool straight = !std::isfinite(bend.radius);
    std::vector<std::string> row{
        straight ? "straight"
                 : std::string(bend.left ? "left " : "right ") + fixed(1e3 * bend.radius, 0) + " mm",
        std::to_string(bend.count) + "x"};
    if (bend.held) {
      row.push_back(bar ? fixed(bend.held->error, 2) + " mm" : fixed(1e2 * bend.held->error, 2) + " %");
      row.push_back(fixed(1e3 * bend.held->deviation, 2) + " mm");
      row.push_back(fixed(1e2 * bend.held->steer, 1) + " %");
    } else {
      row.insert(row.end(), {"lost", "", ""});
    }
    row.push_back(bend.losing_base < 1.0 ? fixed(1e2 * bend.losing_base, 1) + " %, " +
                                               fixed(1e3 * bend.losing_speed, 0) + " mm/s"
                                         : "never");
    row.push_back(fixed(bend.duration, 2) + " s");
    rows.push_back(row);
  }
  return table(rows);
}

// ---- derivative ---------------------------------------------------------------------------------------

Json json_of(const DerivativePoint& point) {
  Json json;
  json["kd_per_loop"] = point.kd;
  json["derivative_ms"] = 1e3 * point.time;
  json["filter_ms"] = 1e3 * point.filter;
  json["stable"] = point.stable;
  json["sensitivity_peak"] = point.stable ? Json(point.peak) : Json(nullptr);
  json["damping"] = point.stable ? Json(point.damping) : Json(nullptr);
  json["gain_margin_db"] = point.gain_high ? Json(decibels(*point.gain_high)) : Json(nullptr);
  json["steer_noise_pct"] = point.stable ? Json(1e2 * point.noise.steer) : Json(nullptr);
  json["deviation_noise_mm"] = point.stable ? Json(1e3 * point.noise.deviation) : Json(nullptr);
  return json;
}

Json json_of(const std::optional<DerivativePoint>& point) { return point ? json_of(*point) : Json(nullptr); }

Json json_of(const Summary& summary) {
  Json json;
  json["outcome"] = name_of(summary.outcome);
  json["time_s"] = summary.time;
  json["deviation_max_mm"] = 1e3 * summary.deviation_max;
  json["deviation_rms_mm"] = 1e3 * summary.deviation_rms;
  json["reversals_per_s"] = summary.reversals_per_s;
  json["saturated_pct"] = 1e2 * summary.saturated;
  return json;
}

Json json_of(const DerivativeCase& found) {
  static constexpr const char* verdicts[] = {"pays", "nothing_gained", "too_noisy", "drive_is_worse"};
  Json json;
  json["pays"] = found.pays();
  json["verdict"] = verdicts[static_cast<int>(found.verdict)];
  json["summary"] = found.words;
  json["lead_ms"] = 1e3 * found.lead;
  json["late_ms"] = 1e3 * found.late;
  json["noise_allowed_pct"] = 1e2 * found.noise_allowed;
  json["without"] = json_of(found.without);
  json["best"] = json_of(found.best);
  json["sharpest"] = json_of(found.sharpest);
  json["drive_without"] = json_of(found.drive_without);
  json["drive_with"] = found.sharpest ? json_of(found.drive_with) : Json(nullptr);
  json["grid"] = Json::array();
  for (const DerivativePoint& point : found.grid) json["grid"].push_back(json_of(point));
  return json;
}

std::vector<std::string> row_of(const std::string& name, const DerivativePoint& point) {
  if (!point.stable) return {name, brief(point.kd), fixed(1e3 * point.filter, 1) + " ms", "unstable"};
  return {name,
          brief(point.kd),
          fixed(1e3 * point.filter, 1) + " ms",
          fixed(point.peak, 2),
          fixed(point.damping, 2),
          point.gain_high ? fixed(decibels(*point.gain_high), 1) + " dB" : "none",
          fixed(1e2 * point.noise.steer, 2) + " %"};
}

std::string points_text(const DerivativeCase& found) {
  std::vector<std::vector<std::string>> rows{
      {"", "Kd per loop", "filter", "sensitivity peak", "damping", "gain margin", "noise on steer"}};
  rows.push_back(row_of("without D", found.without));
  if (found.best) rows.push_back(row_of("best that may be paid for", *found.best));
  if (found.sharpest) rows.push_back(row_of("sharpest, whatever its noise", *found.sharpest));
  return table(rows);
}

Error named(Error error, const std::string& name) {
  error.where = error.where.empty() ? name : name + ": " + error.where;
  return error;
}

}  // namespace

Answer terms_command(const TermsCall& call) {
  const auto loaded = load(call.input);
  if (!loaded) return refused(loaded.error());
  const auto plan = plan_of(*loaded);
  if (!plan) return refused(plan.error());
  const Scenario& scenario = loaded->scenario;
  const auto integral = explain_integral(scenario, plan->ground);
  if (!integral) return refused(named(integral.error(), loaded->name));
  const auto derivative = weigh_derivative(scenario, {}, plan->ground);
  if (!derivative) return refused(named(derivative.error(), loaded->name));

  Answer answer;
  answer.json["integral"] = json_of(*integral);
  answer.json["derivative"] = json_of(*derivative);
  answer.text = scenario.title.empty() ? "" : scenario.title + '\n';
  answer.text += "I\n" + integral->words + "\n\n" +
                 bends_text(*integral, scenario.sensors.scheme == Scheme::bar) + "\nD\n" + derivative->words +
                 "\n\n" + points_text(*derivative);
  return answer;
}

}  // namespace lw::shell
