#include "engine/tuning/straight.h"

#include <algorithm>
#include <cmath>

#include "engine/theory/roots.h"

namespace lw {
namespace {

/// The course alone is replaced, and what would make its places differ.
Scenario laid_straight(Scenario scenario, double length, double middle) {
  scenario.course.closed = false;
  scenario.course.start_mm = {0.0, 1e3 * middle};
  scenario.course.heading_deg = 0.0;
  scenario.course.pieces = {{.straight_mm = 1e3 * length}};
  scenario.course.points_mm.clear();
  scenario.course.corners.clear();
  scenario.course.gaps_mm.clear();
  scenario.floor.texture_pct = 0.0;
  scenario.floor.light_pct_per_m = {0.0, 0.0};
  scenario.drive.start_offset_mm = scenario.drive.start_heading_deg = 0.0;
  scenario.drive.laps = 1;
  return scenario;
}

/// How far sensors over an edge are from the borders of cells, in cells: at most 0.5.
double clearance(const Straight& straight, const Sensors& sensors, double middle, double pitch) {
  double least = 0.5;
  for (const double lateral : sensors.lateral_mm) {
    const double beside = straight.loop.rest + 1e-3 * lateral;
    const double from_edge = std::fabs(std::fabs(beside) - straight.half_width);
    if (from_edge >= straight.spot_radius) continue;  // sees no edge
    const double cell = (middle + beside) / pitch;
    least = std::min(least, std::fabs(cell - std::round(cell)));
  }
  return least;
}

double clearest_middle(const Straight& straight, const Sensors& sensors, double pitch) {
  constexpr int places = 32;
  double best = 0.0, most = -1.0;
  for (int i = 0; i < places; ++i) {
    const double middle = pitch * i / places;
    const double clear = clearance(straight, sensors, middle, pitch);
    if (clear > most + 1e-9) best = middle, most = clear;
  }
  return best;
}

/// Steer at which the wheels, commanded base -+ steer, turn the vehicle nowhere.
double trim_of(const Drivetrain<double>& train, double base) {
  const auto yaw = [&](double steer) {
    const WheelTarget<double> target =
        wheel_target(train, held(base - steer, -1.0, 1.0), held(base + steer, -1.0, 1.0));
    return axle_yaw(train, target.common, target.difference);
  };
  return yaw(0.0) == 0.0 ? 0.0 : bracketed_root(yaw, -1.0, 1.0, 1e-13);
}

Setup<double> setup_of(const Straight& straight, const SwingSetting& setting) {
  const Plan& plan = straight.plan;
  Setup<double> setup{plan.rig, plan.wiring, view_of(plan.ground->line), view_of(plan.ground->floor),
                      make_interval(plan.rig.train, plan.rig.timing.period)};
  Law<double>& law = setup.rig.law;
  const bool given = static_cast<bool>(setting.steer);
  law.kp = given ? 0.0 : setting.gains.kp;
  law.ki = given ? 0.0 : setting.gains.ki;
  law.kd = given ? 0.0 : setting.gains.kd;
  law.integral_limit = greater(law.integral_limit, magnitude(straight.trim));
  if (given) law.integral_limit = 2.0;  // the steer given takes I's place
  setup.wiring.law.per_second = false;
  return setup;
}

State<double> settled(const Setup<double>& setup, const Straight& straight, const SwingSetting& setting) {
  State<double> state = start(setup, setting.draw);
  const double base = setup.rig.law.base;
  state.target = wheel_target(setup.rig.train, held(base - straight.trim, -1.0, 1.0),
                              held(base + straight.trim, -1.0, 1.0));
  state.motion.common = state.target.common;
  state.motion.difference = state.target.difference;
  state.motion.x = straight.start_x;
  state.motion.y = straight.middle + straight.loop.rest + setting.offset;
  state.motion.heading = 0.0;
  state.track.place = straight.start_x + setup.rig.optics.forward;
  state.law.integral = straight.trim;
  return state;
}

/// What the controller would be given at a deviation from rest, on the straight's own floor; neither rounding
/// nor noise.
double error_at(const Straight& straight, double deviation, SensorState<double>& state) {
  const Optics<double>& optics = straight.plan.rig.optics;
  const SensorWiring& wiring = straight.plan.wiring.sensors;
  const FloorView floor = view_of(straight.plan.ground->floor);
  const double x = straight.start_x + optics.forward, y = straight.middle + straight.loop.rest + deviation;
  for (int i = 0; i < wiring.count; ++i) {
    const double bright = floor_brightness(floor, x, y + optics.lateral[i]);
    state.reading[i] = held(optics.dark[i] + optics.contrast[i] * bright, 0.0, 1.0);
  }
  return error_from(optics, wiring, state);
}

bool limited(const Setup<double>& setup, const Terms<double>& terms) {
  const double slower = lesser(magnitude(terms.left), magnitude(terms.right));
  return terms.saturated || slower < setup.rig.train.dead_band;
}

void set_back(const Straight& straight, State<double>& state) {
  if (state.motion.x < straight.start_x + straight.stretch) return;
  state.motion.x -= straight.stretch;
  state.track.place -= straight.stretch;
}

}  // namespace

Result<Straight> make_straight(const Scenario& scenario, std::shared_ptr<const Ground> ground) {
  const Result<SampledLoop> loop = linearise(scenario);
  if (!loop) return loop.error();
  Straight straight;
  straight.loop = *loop;
  straight.spot_radius = 0.5e-3 * scenario.sensors.spot_mm;
  straight.half_width = 0.5e-3 * scenario.course.line_mm;
  for (const double lateral : scenario.sensors.lateral_mm)
    straight.outermost = std::max(straight.outermost, 1e-3 * std::fabs(lateral));

  const double pitch = straight.spot_radius / 4.0;         // of the raster, floor.h
  const double travel = 4.0 * loop->speed * loop->period;  // more than a jittered period can go
  straight.start_x = 2.0 * straight.spot_radius + 0.01;
  straight.stretch = pitch * std::ceil(std::max(0.2, travel) / pitch);
  straight.middle = clearest_middle(straight, scenario.sensors, pitch);
  const double length = straight.start_x + straight.stretch + travel + loop->forward + straight.start_x;
  auto plan = make_plan(laid_straight(scenario, length, straight.middle), std::move(ground));
  if (!plan) return plan.error();
  straight.plan = std::move(*plan);
  straight.plan.rig.task.time_limit = straight.plan.rig.task.finish = HUGE_VAL;
  straight.trim = trim_of(straight.plan.rig.train, loop->base);
  return straight;
}

std::vector<SwingRow> swing(const Straight& straight, const SwingSetting& setting, std::size_t most_rows,
                            const std::function<bool(const std::vector<SwingRow>&)>& go_on) {
  const Setup<double> setup = setup_of(straight, setting);
  CommandQueue<double> queue;
  if (setup.wiring.delay) queue.entries.resize(static_cast<std::size_t>(setup.wiring.queue_length));
  State<double> state = settled(setup, straight, setting);
  std::vector<SwingRow> rows;
  for (;;) {
    follow_phase(setup, state);
    sense_phase(setup, state);
    if (setting.steer) state.law.integral = straight.trim + setting.steer(state.error);
    control_phase(setup, state);
    rows.push_back({state.moment.t, state.track.deviation - straight.loop.rest, state.error,
                    state.terms.steer - straight.trim, limited(setup, state.terms)});
    if (state.verdict != running || rows.size() >= most_rows || !go_on(rows)) return rows;
    advance_phase(setup, state, queue);
    set_back(straight, state);
  }
}

double swing_slope(const Straight& straight, double amplitude) {
  constexpr int places = 128;
  SensorState<double> state{};  // a bar that sees no line keeps its last side
  double sum = 0.0;
  for (int i = 0; i < places; ++i) {
    const double sine = std::sin(2.0 * pi * (i + 0.5) / places);
    sum -= error_at(straight, amplitude * sine, state) * sine;
  }
  return 2.0 * sum / (places * amplitude);
}

double small_amplitude(const Straight& straight) {
  const double quarter = 0.25 * straight.spot_radius;
  const double most = straight.half_width + straight.outermost;
  double best = quarter, nearest = HUGE_VAL;
  for (double amplitude = quarter; amplitude < most; amplitude *= 1.1) {
    const double off = std::fabs(swing_slope(straight, amplitude) / straight.loop.slope - 1.0);
    if (off < nearest) best = amplitude, nearest = off;
    if (nearest < 0.03) break;
  }
  return best;
}

}  // namespace lw
