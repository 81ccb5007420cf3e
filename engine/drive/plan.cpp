#include "engine/drive/plan.h"

#include <cmath>

#include "engine/course/angles.h"
#include "engine/numeric/hash.h"
#include "engine/scenario/same.h"
#include "engine/scenario/validate.h"

namespace lw {

namespace {

constexpr double standard_gravity = 9.80665;  // m/s^2, ISO 80000-3

double outermost_mm(const Sensors& sensors) {
  double most = 0.0;
  for (const double lateral : sensors.lateral_mm) most = greater(most, magnitude(lateral));
  return most;
}

/// How far from the line a sensor may be while the drive goes on, m.
double floor_margin(const Scenario& scenario) {
  const double held = scenario.drive.lost_mm + outermost_mm(scenario.sensors);
  return 1e-3 * (held + magnitude(scenario.drive.start_offset_mm) + scenario.sensors.spot_mm);
}

/// Cutting a right-angled corner by the deviation that counts as lost puts the next foot twice that far
/// along.
double tracking_window(const Scenario& scenario) { return 2e-3 * scenario.drive.lost_mm; }

/// Steps per unit for a rounding step; 0 stands for no rounding, which the wiring leaves out.
double inverse_step(double step) { return step > 0.0 ? 1.0 / step : 0.0; }

Task<double> task_of(const Scenario& scenario, const Centreline& line) {
  const CoursePoint begin = point_at(line, 0.0);
  const double offset = 1e-3 * scenario.drive.start_offset_mm;
  const double forward = 1e-3 * scenario.sensors.forward_mm;
  const double turned = scenario.drive.start_heading_deg * rad_per_deg;
  return {.finish = line.closed ? static_cast<double>(scenario.drive.laps) * line.length : line.length,
          .lost = 1e-3 * scenario.drive.lost_mm,
          .time_limit = scenario.drive.time_limit_s,
          .start_x = begin.x - offset * begin.tangent_y,
          .start_y = begin.y + offset * begin.tangent_x,
          .start_heading = direction_angle(begin.tangent_x, begin.tangent_y) + turned,
          .start_progress = held(forward, 0.0, line.length)};
}

int queue_length(const Loop& loop, double delay_ms) {
  const double shortest = loop.period_ms * (1.0 - 1e-2 * loop.jitter_pct);
  const double waiting = delay_ms / shortest + 3.0;  // one now acting, one fresh, one for rounding
  int length = 4;
  while (length < waiting) length *= 2;
  return length;
}

}  // namespace

Drivetrain<double> drivetrain_of(const Vehicle& vehicle) {
  const double left = 0.5e-3 * vehicle.wheel_left_mm, right = 0.5e-3 * vehicle.wheel_right_mm;
  const double track = 1e-3 * vehicle.track_width_mm;
  const double dead_band = 1e-2 * vehicle.dead_band_pct;
  const double full_speed = vehicle.top_speed_rpm * (2.0 * pi / 60.0) * (1e-2 * vehicle.supply_pct);
  return {.speed_per_common = 0.5 * (right + left),
          .speed_per_difference = 0.5 * (right - left),
          .yaw_per_common = (right - left) / track,
          .yaw_per_difference = (right + left) / track,
          .dead_band = dead_band,
          .speed_past_dead_band = full_speed / (1.0 - dead_band),
          .forward_time = 1e-3 * vehicle.forward_time_constant_ms,
          .turn_time = 1e-3 * vehicle.turn_time_constant_ms,
          .slide_limit = vehicle.grip > 0.0 ? vehicle.grip * standard_gravity : HUGE_VAL};
}

Optics<double> optics_of(const Sensors& sensors, const FloorLook& look) {
  Optics<double> optics{};
  const double black = 1e-2 * sensors.black_pct, white = 1e-2 * sensors.white_pct;
  optics.forward = 1e-3 * sensors.forward_mm;
  for (std::size_t i = 0; i < sensors.lateral_mm.size(); ++i) {
    optics.lateral[i] = 1e-3 * sensors.lateral_mm[i];
    optics.dark[i] = black + (sensors.offset_pct.empty() ? 0.0 : 1e-2 * sensors.offset_pct[i]);
    optics.contrast[i] = (white - black) * (sensors.gain.empty() ? 1.0 : sensors.gain[i]);
  }
  optics.light_x = 1e-2 * look.light_pct_per_m[0];
  optics.light_y = 1e-2 * look.light_pct_per_m[1];
  optics.noise = 1e-2 * sensors.noise_pct;
  optics.step = 1e-2 * sensors.step_pct;
  optics.steps_per_unit = inverse_step(optics.step);
  optics.lag = 1e-3 * sensors.lag_ms;
  optics.refresh = 1e-3 * sensors.refresh_ms;
  optics.target = 1e-2 * sensors.target_pct;
  optics.edge_sign = sensors.edge == Edge::left ? 1.0 : -1.0;
  optics.white = white;
  optics.per_contrast = 1.0 / (white - black);
  optics.outermost = outermost_mm(sensors);
  return optics;
}

Law<double> law_of(const Controller& controller, const Sensors& sensors, const Vehicle& vehicle) {
  const double step = 1e-2 * vehicle.command_step_pct;
  const double full_error = sensors.scheme == Scheme::bar ? outermost_mm(sensors) : 1.0;
  return {.base = 1e-2 * controller.base_pct,
          .ease = controller.ease / full_error,
          .kp = controller.kp,
          .ki = controller.ki,
          .kd = controller.kd,
          .filter = 1e-3 * controller.derivative_filter_ms,
          .integral_limit = 1e-2 * controller.integral_limit_pct,
          .steer_limit = 1e-2 * controller.steer_limit_pct,
          .command_step = step,
          .command_steps_per_unit = inverse_step(step)};
}

Wiring wiring_of(const Scenario& scenario) {
  const Sensors& sensors = scenario.sensors;
  const bool second_is_left = sensors.lateral_mm.size() == 2 && sensors.lateral_mm[1] > sensors.lateral_mm[0];
  Wiring wiring;
  wiring.sensors = {
      .scheme = sensors.scheme,
      .count = static_cast<int>(sensors.lateral_mm.size()),
      .left = second_is_left ? 1 : 0,
      .right = second_is_left ? 0 : 1,
      .noise = sensors.noise_pct > 0.0,
      .rounding = sensors.step_pct > 0.0,
      .lag = sensors.lag_ms > 0.0,
      .refresh = sensors.refresh_ms > 0.0,
      .light = scenario.floor.light_pct_per_m[0] != 0.0 || scenario.floor.light_pct_per_m[1] != 0.0};
  wiring.law = {.per_second = scenario.controller.gains == GainUnit::per_second,
                .rounding = scenario.vehicle.command_step_pct > 0.0};
  wiring.jitter = scenario.loop.jitter_pct > 0.0;
  wiring.delay = scenario.vehicle.command_delay_ms > 0.0;
  wiring.queue_length = wiring.delay ? queue_length(scenario.loop, scenario.vehicle.command_delay_ms) : 0;
  wiring.seed = static_cast<std::uint64_t>(scenario.drive.seed);
  return wiring;
}

std::uint64_t ground_key(const Scenario& scenario) {
  std::uint64_t hash = fnv_start;
  Scenario read;  // a scenario that has only what the ground is made of
  read.course = scenario.course;
  read.floor = scenario.floor;
  read.sensors.spot_mm = scenario.sensors.spot_mm;
  hash = fnv_word(hash, content_hash(read));
  hash = fnv_number(hash, floor_margin(scenario));
  return fnv_number(hash, tracking_window(scenario));
}

Result<std::shared_ptr<const Ground>> make_ground(const Scenario& scenario) {
  Result<Centreline> line = make_centreline(scenario.course, tracking_window(scenario));
  if (!line) return line.error();
  const FloorNeed need{0.5e-3 * scenario.sensors.spot_mm, floor_margin(scenario)};
  Result<Floor> floor = make_floor(*line, scenario.course, scenario.floor, need);
  if (!floor) return floor.error();
  return std::shared_ptr<const Ground>(std::make_shared<Ground>(Ground{std::move(*line), std::move(*floor)}));
}

Result<Plan> make_plan(const Scenario& scenario, std::shared_ptr<const Ground> ground) {
  if (const auto error = validate(scenario)) return *error;
  if (!ground) {
    auto made = make_ground(scenario);
    if (!made) return made.error();
    ground = *made;
  }
  const Rig<double> rig{.train = drivetrain_of(scenario.vehicle),
                        .optics = optics_of(scenario.sensors, scenario.floor),
                        .law = law_of(scenario.controller, scenario.sensors, scenario.vehicle),
                        .timing = {.period = 1e-3 * scenario.loop.period_ms,
                                   .jitter = 1e-2 * scenario.loop.jitter_pct,
                                   .delay = 1e-3 * scenario.vehicle.command_delay_ms},
                        .task = task_of(scenario, ground->line)};
  return Plan{rig, wiring_of(scenario), std::move(ground)};
}

}  // namespace lw
