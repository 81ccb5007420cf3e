// A drive's own critical gain and growth, measured as on the floor: a small push off the line of a straight,
// and a look at whether the swing that follows grows.
#pragma once

#include <cmath>
#include <memory>

#include "engine/drive/drive.h"
#include "tests/engine/theory/loops.h"

namespace lw::test {

/// A scenario whose swings stay small against the spot for many periods: long straight, no rounding, wheels
/// up to speed at once, a wide spot, so that the chord over the edge hardly shortens.
inline Scenario experiment(double period_ms, double delay_ms) {
  Scenario scenario = cart(period_ms, delay_ms);
  scenario.vehicle.forward_time_constant_ms = 0.0;
  scenario.sensors.spot_mm = 24.0;
  scenario.sensors.lateral_mm = {19.5, -19.5};
  scenario.course.line_mm = 39.0;
  scenario.course.pieces = {{.straight_mm = 20000.0}};
  scenario.drive.start_offset_mm = 0.05;
  scenario.drive.lost_mm = 120.0;
  return scenario;
}

/// One ground for many gains.
class Experiment {
 public:
  explicit Experiment(Scenario scenario) : scenario_(std::move(scenario)) {
    const auto ground = make_ground(scenario_);
    if (!ground) FAIL(text_of(ground.error()));
    ground_ = *ground;
  }

  /// Growth (1/s) of the swing's amplitude about `rest` (m): half the logarithm of the ratio of its energy in
  /// two neighbouring windows of `swings` periods each (s), after `settle` seconds.
  double growth(double kp, double period, double rest, double settle, int swings) {
    scenario_.controller.kp = kp;
    const double window = swings * period;
    scenario_.drive.time_limit_s = settle + 2.0 * window + 0.1;
    const Result<Plan> plan = make_plan(scenario_, ground_);
    if (!plan) FAIL(text_of(plan.error()));
    Trace trace;
    drive(*plan, &trace);
    double energy[2] = {0.0, 0.0};
    for (const TraceRow& row : trace.rows) {
      const double into = (row.t - settle) / window;
      if (into >= 0.0 && into < 2.0) energy[into < 1.0 ? 0 : 1] += std::pow(row.deviation - rest, 2);
    }
    return 0.5 * std::log(energy[1] / energy[0]) / window;
  }

  /// The gain at which the growth passes 0, by bisection within a factor around a guess.
  double critical_gain(double guess, double period, double rest) {
    double low = 0.8 * guess, high = 1.25 * guess;
    for (int i = 0; i < 14; ++i) {
      const double middle = 0.5 * (low + high);
      (growth(middle, period, rest, 6.0 * period, 6) > 0.0 ? high : low) = middle;
    }
    return 0.5 * (low + high);
  }

 private:
  Scenario scenario_;
  std::shared_ptr<const Ground> ground_;
};

}  // namespace lw::test
