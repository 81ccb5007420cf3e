#include "engine/tuning/search_space.h"

#include <algorithm>
#include <cmath>
#include <cstdlib>

#include "engine/numeric/words.h"
#include "engine/theory/margins.h"

namespace lw {
namespace {

/// Sizes that gains of this loop are of, per loop.
struct Scale {
  double gain, swing, period;  // critical gain of P alone or a guess at it; its period and the loop's, s
};

Scale scale_of(const Scenario& scenario) {
  const double period = 1e-3 * scenario.loop.period_ms;
  const double own = std::max(1e-6, std::fabs(scenario.controller.kp));
  const Result<SampledLoop> loop = linearise(scenario);
  if (!loop) return {2.0 * own, 50.0 * period, period};
  const Critical alone = critical(*loop);
  if (!alone.gain) return {2.0 * own, 10.0 * speed_limit(*loop).late, period};
  return {*alone.gain, *alone.period, period};
}

Axis usual(const Scenario& scenario, Variable variable, const Scale& scale) {
  const bool per_second = scenario.controller.gains == GainUnit::per_second;
  const double own = value_of(scenario, variable);
  switch (variable) {
    case Variable::kp:
      return {variable, 0.02 * scale.gain, 3.0 * scale.gain};
    case Variable::ki:
      return {variable, 0.0, 2.0 * scale.gain / scale.swing * (per_second ? 1.0 : scale.period)};
    case Variable::kd:
      return {variable, 0.0, 0.3 * scale.gain * scale.swing / (per_second ? 1.0 : scale.period)};
    case Variable::filter:
      return {variable, 0.0, std::min(10000.0, 20.0 * scenario.loop.period_ms)};
    case Variable::base:
      return {variable, 5.0, 100.0};
    case Variable::forward:
      return {variable, 0.3 * own, std::min(5000.0, std::max(3.0 * own, 20.0))};
    case Variable::spacing:
      return {variable, 0.5 * own, std::min(1000.0, 2.0 * own)};
  }
  return {variable, 0.0, 1.0};
}

struct Allowed {
  double low, high;
  const char* rule;
};

Allowed allowed(Variable variable) {
  switch (variable) {
    case Variable::kp:
      return {1e-9, 1e6, "above 0 and at most 1e6"};
    case Variable::ki:
    case Variable::kd:
      return {0.0, 1e6, "between 0 and 1e6"};
    case Variable::filter:
      return {0.0, 10000.0, "between 0 and 10000 ms"};
    case Variable::base:
      return {0.0, 100.0, "between 0 and 100 %"};
    case Variable::forward:
      return {0.0, 5000.0, "between 0 and 5000 mm"};
    case Variable::spacing:
      return {1e-3, 1000.0, "above 0 and at most 1000 mm"};
  }
  return {0.0, 0.0, ""};
}

std::optional<Error> fault_of(const Scenario& scenario, const std::vector<FreeVariable>& free,
                              std::size_t i) {
  const FreeVariable& one = free[i];
  const std::string name(name_of(one.variable));
  for (std::size_t k = 0; k < i; ++k) {
    if (free[k].variable == one.variable) return Error{"free", name, "set free twice"};
  }
  if (one.variable == Variable::spacing && value_of(scenario, one.variable) <= 0.0)
    return Error{"free", name, "all sensors lie in the middle, and there is no spacing to change"};
  const Allowed range = allowed(one.variable);
  for (const auto& bound : {one.low, one.high}) {
    if (bound && !(*bound >= range.low && *bound <= range.high))
      return Error{"free", name + " = " + significant(*bound, 6), range.rule};
  }
  if (one.low && one.high && !(*one.low < *one.high))
    return Error{"free", name + " = " + significant(*one.low, 6) + " to " + significant(*one.high, 6),
                 "the second is not above the first"};
  return {};
}

bool by_ratio(const Axis& axis) { return axis.variable == Variable::kp && axis.low > 0.0; }
bool by_square(const Axis& axis) {
  return axis.variable == Variable::ki || axis.variable == Variable::kd || axis.variable == Variable::filter;
}

double to_four_digits(double value) { return std::strtod(significant(value, 4).c_str(), nullptr); }

}  // namespace

double value_of(const Scenario& scenario, Variable variable) {
  switch (variable) {
    case Variable::kp:
      return scenario.controller.kp;
    case Variable::ki:
      return scenario.controller.ki;
    case Variable::kd:
      return scenario.controller.kd;
    case Variable::filter:
      return scenario.controller.derivative_filter_ms;
    case Variable::base:
      return scenario.controller.base_pct;
    case Variable::forward:
      return scenario.sensors.forward_mm;
    case Variable::spacing:
      break;
  }
  double most = 0.0;
  for (const double lateral : scenario.sensors.lateral_mm) most = std::max(most, std::fabs(lateral));
  return most;
}

void set_value(Scenario& scenario, Variable variable, double value) {
  switch (variable) {
    case Variable::kp:
      scenario.controller.kp = value;
      return;
    case Variable::ki:
      scenario.controller.ki = value;
      return;
    case Variable::kd:
      scenario.controller.kd = value;
      return;
    case Variable::filter:
      scenario.controller.derivative_filter_ms = value;
      return;
    case Variable::base:
      scenario.controller.base_pct = value;
      return;
    case Variable::forward:
      scenario.sensors.forward_mm = value;
      return;
    case Variable::spacing:
      break;
  }
  const double by = value / value_of(scenario, Variable::spacing);
  for (double& lateral : scenario.sensors.lateral_mm) lateral *= by;
}

Result<std::vector<Axis>> axes_of(const Scenario& scenario, const std::vector<FreeVariable>& free) {
  if (free.empty()) return Error{"free", "", "nothing is set free to be searched"};
  const Scale scale = scale_of(scenario);
  std::vector<Axis> axes;
  for (std::size_t i = 0; i < free.size(); ++i) {
    if (const auto fault = fault_of(scenario, free, i)) return *fault;
    Axis axis = usual(scenario, free[i].variable, scale);
    const double own = value_of(scenario, axis.variable);
    const Allowed range = allowed(axis.variable);
    axis.low = free[i].low.value_or(std::clamp(std::min(axis.low, own), range.low, range.high));
    axis.high = free[i].high.value_or(std::clamp(std::max(axis.high, own), range.low, range.high));
    if (!(axis.low < axis.high))
      return Error{"free",
                   std::string(name_of(axis.variable)) + " = " + significant(axis.low, 6) + " to " +
                       significant(axis.high, 6),
                   "the second is not above the first"};
    axes.push_back(axis);
  }
  return axes;
}

std::vector<double> values_at(const std::vector<Axis>& axes, const std::vector<double>& point) {
  std::vector<double> values;
  for (std::size_t i = 0; i < axes.size(); ++i) {
    const Axis& axis = axes[i];
    const double u = point[i], width = axis.high - axis.low;
    const double value = by_ratio(axis)    ? axis.low * std::pow(axis.high / axis.low, u)
                         : by_square(axis) ? axis.low + width * u * u
                                           : axis.low + width * u;
    values.push_back(std::clamp(to_four_digits(value), axis.low, axis.high));
  }
  return values;
}

std::vector<double> point_at(const std::vector<Axis>& axes, const std::vector<double>& values) {
  std::vector<double> point;
  for (std::size_t i = 0; i < axes.size(); ++i) {
    const Axis& axis = axes[i];
    const double value = std::clamp(values[i], axis.low, axis.high), width = axis.high - axis.low;
    point.push_back(by_ratio(axis)    ? std::log(value / axis.low) / std::log(axis.high / axis.low)
                    : by_square(axis) ? std::sqrt((value - axis.low) / width)
                                      : (value - axis.low) / width);
  }
  return point;
}

}  // namespace lw
