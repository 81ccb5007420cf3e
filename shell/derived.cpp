#include "shell/derived.h"

#include <algorithm>
#include <cmath>

namespace lw::shell {
namespace {

struct Steady {
  double speed, yaw_rate;  // m/s, rad/s
  double radius() const { return yaw_rate == 0.0 ? HUGE_VAL : std::fabs(speed / yaw_rate); }
};

Steady steady(const Drivetrain<double>& train, double left, double right) {
  const WheelTarget<double> target = wheel_target(train, left, right);
  return {axle_speed(train, target.common, target.difference),
          axle_yaw(train, target.common, target.difference)};
}

Steady steered(const Plan& plan, double base, double steer) {
  return steady(plan.rig.train, std::max(base - steer, -1.0), std::min(base + steer, 1.0));
}

/// Commands at no error, rounded as the law does.
Steady unsteered(const Plan& plan) {
  LawState<double> state{};
  const Terms<double> terms =
      control(plan.rig.law, plan.wiring.law, 0.0, plan.rig.timing.period, Mask<double>(true), state);
  return steady(plan.rig.train, terms.left, terms.right);
}

double tightest_bend(const Centreline& line) {
  double least = HUGE_VAL;
  for (const CourseSection& section : line.sections) least = std::min(least, section.radius);
  return least;
}

double ratio(double value, double by) { return by > 0.0 ? value / by : HUGE_VAL; }

}  // namespace

Gains gains_per_loop(const Scenario& scenario) {
  const Controller& controller = scenario.controller;
  const double period = 1e-3 * scenario.loop.period_ms;
  if (controller.gains == GainUnit::per_loop) return {controller.kp, controller.ki, controller.kd};
  return {controller.kp, controller.ki * period, controller.kd / period};
}

Gains gains_per_second(const Scenario& scenario) {
  const Controller& controller = scenario.controller;
  const double period = 1e-3 * scenario.loop.period_ms;
  if (controller.gains == GainUnit::per_second) return {controller.kp, controller.ki, controller.kd};
  return {controller.kp, controller.ki / period, controller.kd * period};
}

std::vector<Figure> figures_of(const Scenario& scenario, const Plan& plan) {
  const Rig<double>& rig = plan.rig;
  const Centreline& line = plan.ground->line;
  const double base = rig.law.base;
  const double speed = unsteered(plan).speed;
  const double most_steer = std::max(0.0, std::min(1.0 - base, rig.law.steer_limit));
  const double tightest = tightest_bend(line);
  std::vector<Figure> figures{
      {"top_speed_mm_s", "top speed", 1e3 * steady(rig.train, 1.0, 1.0).speed, "mm/s"},
      {"base_speed_mm_s", "base speed", 1e3 * speed, "mm/s"},
      {"loops_per_s", "loops per second", 1.0 / rig.timing.period, "1/s"},
      {"travel_per_loop_mm", "travel per loop at base speed", 1e3 * speed * rig.timing.period, "mm"},
      {"forward_time_ms", "sensors ahead at base speed", 1e3 * ratio(rig.optics.forward, speed), "ms"},
      {"delay_loops", "command delay in loops", rig.timing.delay / rig.timing.period, ""},
      {"turn_radius_at_limit_mm", "turning radius at the steer limit",
       1e3 * steered(plan, base, rig.law.steer_limit).radius(), "mm"},
      {"turn_radius_unsaturated_mm", "turning radius without saturation",
       1e3 * steered(plan, base, most_steer).radius(), "mm"},
      {"course_length_mm", "course length", 1e3 * line.length, "mm"},
      {"course_time_s", "course at base speed", ratio(rig.task.finish, speed), "s"},
      {"corners", "sharp corners", static_cast<double>(line.corners.size()), ""},
      {"tightest_bend_mm", "tightest bend", 1e3 * tightest, "mm"},
      {"tightest_bend_grip", "grip it takes at base speed", ratio(speed * speed / 9.80665, tightest), ""},
  };
  if (scenario.vehicle.grip > 0.0)
    figures.push_back({"tightest_bend_speed_mm_s", "speed that grip allows there",
                       1e3 * std::sqrt(rig.train.slide_limit * tightest), "mm/s"});
  return figures;
}

}  // namespace lw::shell
