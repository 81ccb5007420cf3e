// The kernel is one source over a lane type: four drives in one pack have the bits of each drive alone.
#include <cmath>

#include "engine/drive/drive.h"
#include "engine/drive/kernel.h"
#include "tests/catch.h"
#include "tests/engine/drive/courses.h"

using namespace lw;
using namespace lw::test;

namespace {

using L = Pack<4>;

/// Interleaves four structs that hold nothing but doubles.
template <class Wide, class One>
Wide side_by_side(const One (&one)[4]) {
  static_assert(sizeof(Wide) == 4 * sizeof(One));
  Wide wide;
  for (std::size_t field = 0; field < sizeof(One) / sizeof(double); ++field) {
    for (int i = 0; i < 4; ++i) {
      reinterpret_cast<L*>(&wide)[field][i] = reinterpret_cast<const double*>(&one[i])[field];
    }
  }
  return wide;
}

/// Runs four plans of one wiring side by side and holds every period against the traces of the drives alone.
void check_same(const std::vector<Scenario>& scenarios) {
  REQUIRE(scenarios.size() == 4);
  std::shared_ptr<const Ground> ground;
  std::vector<Plan> plans;
  Trace alone[4];
  Rig<double> rigs[4];
  for (int i = 0; i < 4; ++i) {
    Result<Plan> plan = make_plan(scenarios[static_cast<std::size_t>(i)], ground);
    if (!plan) FAIL(text_of(plan.error()));
    ground = plan->ground;
    rigs[i] = plan->rig;
    drive(*plan, &alone[i], static_cast<std::uint64_t>(i));
    plans.push_back(std::move(*plan));
  }
  const Rig<L> rig = side_by_side<Rig<L>>(rigs);
  const Setup<L> setup{rig, plans[0].wiring, view_of(ground->line), view_of(ground->floor),
                       make_interval(rig.train, rig.timing.period)};
  CommandQueue<L> queue;
  queue.entries.resize(static_cast<std::size_t>(setup.wiring.queue_length));
  State<L> state = start(setup, Bits<L>{0, 1, 2, 3});
  std::size_t longest = 0;
  for (const Trace& trace : alone) longest = std::max(longest, trace.rows.size());
  for (std::size_t row = 0; row < longest; ++row) {
    follow_phase(setup, state);
    sense_phase(setup, state);
    control_phase(setup, state);
    tally_phase(state);
    for (int i = 0; i < 4; ++i) {
      if (row >= alone[i].rows.size()) continue;  // that drive has ended; its lane runs on unseen
      const TraceRow& expected = alone[i].rows[row];
      INFO("drive " << i << ", row " << row);
      REQUIRE(state.moment.t[i] == expected.t);
      REQUIRE(state.motion.x[i] == expected.x);
      REQUIRE(state.motion.y[i] == expected.y);
      REQUIRE(state.motion.heading[i] == expected.heading);
      REQUIRE(state.track.deviation[i] == expected.deviation);
      REQUIRE(state.track.laps_done[i] + state.track.place[i] == expected.progress);
      REQUIRE(state.error[i] == expected.error);
      REQUIRE(state.terms.d[i] == expected.d);
      REQUIRE(state.terms.left[i] == expected.left);
      REQUIRE(state.terms.right[i] == expected.right);
    }
    advance_phase(setup, state, queue);
  }
}

std::vector<Scenario> four(const Scenario& scenario) {
  std::vector<Scenario> scenarios(4, scenario);
  const double kp[] = {0.2, 0.3, 0.45, 0.05}, wheel[] = {50.0, 49.5, 50.3, 50.0};
  for (std::size_t i = 0; i < 4; ++i) {
    scenarios[i].controller.kp = kp[i] * scenario.controller.kp / 0.3;
    scenarios[i].vehicle.wheel_left_mm = wheel[i];
  }
  return scenarios;
}

}  // namespace

TEST_CASE("four drives in one pack have the bits of each alone: plain loop") { check_same(four(on_oval())); }

TEST_CASE("four drives in one pack have the bits of each alone: every feature") {
  Scenario scenario = on_eight();
  scenario.loop.jitter_pct = 25.0;
  scenario.vehicle.command_step_pct = 1.0;
  scenario.vehicle.dead_band_pct = 3.0;
  scenario.vehicle.grip = 0.08;
  scenario.sensors.noise_pct = 1.0;
  scenario.sensors.step_pct = 1.0;
  scenario.sensors.refresh_ms = 8.0;
  scenario.sensors.lag_ms = 4.0;
  scenario.controller.ki = 0.02;
  scenario.controller.kd = 0.004;
  scenario.controller.gains = GainUnit::per_second;
  scenario.controller.derivative_filter_ms = 10.0;
  scenario.controller.ease = 0.3;
  scenario.floor.texture_pct = 3.0;
  scenario.floor.light_pct_per_m = {1.0, -2.0};
  std::vector<Scenario> scenarios = four(scenario);
  for (std::size_t i = 0; i < 4; ++i)
    scenarios[i].vehicle.command_delay_ms = 2.0 + 3.7 * static_cast<double>(i);
  for (Scenario& one : scenarios) one.loop.period_ms = 5.0;
  check_same(scenarios);
}

TEST_CASE("four drives in one pack have the bits of each alone: bar of sensors and sharp corners") {
  Scenario scenario = tram();
  scenario.sensors.scheme = Scheme::bar;
  scenario.sensors.lateral_mm = {36, 18, 0, -18, -36};
  scenario.controller.kp = 0.3;
  scenario.controller.base_pct = 30.0;
  scenario.course.pieces = {{.straight_mm = 600.0},
                            {.radius_mm = 0.0, .turn_deg = 60.0},
                            {.straight_mm = 500.0},
                            {.radius_mm = 0.0, .turn_deg = -90.0},
                            {.straight_mm = 500.0}};
  std::vector<Scenario> scenarios = four(scenario);
  for (Scenario& one : scenarios) one.controller.kp *= 0.05;
  check_same(scenarios);
}
