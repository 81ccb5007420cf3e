// What P alone keeps and where it must lose the line: closed forms, and drives on circles and straights.
#include "engine/tuning/integral.h"

#include <cmath>

#include "engine/scenario/fields.h"
#include "engine/stress/ceiling.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

/// A tram on a circle with both time constants alike: from the pose of the steady state it starts on its
/// circle.
Scenario circling(double radius_mm, double sense) {
  Scenario scenario = on_circle(radius_mm, sense);
  scenario.vehicle.turn_time_constant_ms = 40.0;
  scenario.vehicle.forward_time_constant_ms = 40.0;
  return scenario;
}

Held held_of(const Scenario& scenario, double curvature) {
  const auto held = held_by_p(scenario, curvature);
  REQUIRE(held);
  return *held;
}

/// Puts the start where the axle's circle passes, so that nothing has to swing in.
void start_on_circle(Scenario& scenario, double radius, double sense, const Held& held) {
  const double forward = 1e-3 * scenario.sensors.forward_mm;
  const double axle = std::sqrt(std::pow(radius - sense * held.deviation, 2) - forward * forward);
  scenario.drive.start_offset_mm = 1e3 * sense * (radius - axle);
}

/// A second before the end, where an open line ends under the sensors.
TraceRow settled_row(const Scenario& scenario) {
  const auto plan = make_plan(scenario);
  if (!plan) FAIL(text_of(plan.error()));
  Trace trace;
  const Summary summary = drive(*plan, &trace);
  REQUIRE(summary.outcome == Outcome::finished);
  REQUIRE(trace.rows.size() > 400);
  return trace.rows[trace.rows.size() - 200];
}

Scenario edge_circle(double radius, double sense) {
  Scenario scenario = circling(radius, sense);
  scenario.sensors.scheme = Scheme::edge;
  scenario.sensors.lateral_mm = {2.0};
  scenario.controller.kp = 0.5;
  return scenario;
}

Scenario bar_circle(double radius, double sense) {
  Scenario scenario = circling(radius, sense);
  scenario.sensors.scheme = Scheme::bar;
  scenario.sensors.lateral_mm = {24.0, 16.0, 8.0, 0.0, -8.0, -16.0, -24.0};
  scenario.controller.kp = 0.012;
  return scenario;
}

}  // namespace

TEST_CASE(
    "the error that P keeps on a circle is the one a drive settles to, over schemes, sides and wheels") {
  int driven = 0;
  for (const double sense : {1.0, -1.0}) {
    for (const double radius : {0.25, 0.6}) {
      Scenario pair = circling(1e3 * radius, sense);
      Scenario dead = pair;
      dead.vehicle.dead_band_pct = 12.0;
      Scenario uneven = pair;
      uneven.vehicle.wheel_left_mm = 52.0;
      for (Scenario scenario :
           {pair, dead, uneven, edge_circle(1e3 * radius, sense), bar_circle(1e3 * radius, sense)}) {
        const Held held = held_of(scenario, sense / radius);
        start_on_circle(scenario, radius, sense, held);
        const TraceRow row = settled_row(scenario);
        CAPTURE(sense, radius, name_of(scenario.sensors.scheme), scenario.vehicle.dead_band_pct);
        CHECK(row.error == Approx(held.error).epsilon(0.01));
        CHECK(row.steer == Approx(held.steer).epsilon(0.01));
        CHECK(row.speed == Approx(held.speed).epsilon(0.002));
        CHECK(row.deviation == Approx(held.deviation).margin(5e-5));
        ++driven;
      }
    }
  }
  CHECK(driven == 20);
}

TEST_CASE("the error is b (base - dead band) / (2 Ra kp), with Ra the axle's circle") {
  // Rolling without slip: yaw rate = (vR - vL) / b, and v / yaw rate is the radius (Siegwart and Nourbakhsh
  // 2004, chapter 3).
  Scenario scenario = circling(400.0, 1.0);
  scenario.vehicle.dead_band_pct = 10.0;
  const Held held = held_of(scenario, 1.0 / 0.4);
  const double axle = std::sqrt(std::pow(0.4 - held.deviation, 2) - 0.07 * 0.07);
  const double expected = 0.12 * (0.4 - 0.1) / (2.0 * axle * scenario.controller.kp);
  CHECK(held.error == Approx(expected).epsilon(1e-9));

  scenario.vehicle.dead_band_pct = 0.0;  // and roughly b base / (2 R kp)
  CHECK(held_of(scenario, 1.0 / 0.4).error == Approx(0.12 * 0.4 / (2.0 * 0.4 * 0.3)).epsilon(0.03));
}

TEST_CASE("unequal wheels on a straight keep (base - dead band) (rL - rR) / (rL + rR) / kp") {
  Scenario scenario = on_straight(8000.0);
  scenario.vehicle.wheel_left_mm = 51.0;
  scenario.vehicle.dead_band_pct = 8.0;
  const Held held = held_of(scenario, 0.0);
  CHECK(held.error == Approx((0.4 - 0.08) / 101.0 / 0.3).epsilon(1e-7));
  CHECK(held.deviation < 0.0);  // the larger left wheel pushes it to the right
  CHECK(settled_row(scenario).error == Approx(held.error).epsilon(0.01));

  scenario.vehicle.wheel_left_mm = 50.0;
  CHECK(held_of(scenario, 0.0).error == Approx(0.0).margin(1e-12));
  CHECK(losing_base(scenario, 0.0) == 1.0);
}

TEST_CASE("the base at which P alone must lose a circle is the one at which drives do, within 3 %") {
  // A long way around, started in the steady state, so that what loses the line is that there is none.
  int compared = 0;
  for (const double sense : {1.0, -1.0}) {
    Scenario pair = circling(300.0, sense);
    pair.controller.kp = 0.15;
    Scenario edge = edge_circle(300.0, sense);
    edge.controller.kp = 0.25;
    Scenario dead = pair;
    dead.vehicle.dead_band_pct = 15.0;
    for (Scenario scenario : {pair, edge, dead}) {
      const double expected = losing_base(scenario, sense / 0.3);
      REQUIRE(expected > 0.2);
      REQUIRE(expected < 0.95);
      scenario.drive.laps = 3;
      scenario.controller.base_pct = 99.0 * expected;
      start_on_circle(scenario, 0.3, sense, held_of(scenario, sense / 0.3));
      const auto ceiling =
          find_ceiling(scenario, own_choice(scenario),
                       {.low_pct = 80.0 * expected, .high_pct = 110.0 * expected, .step_pct = 1.0});
      REQUIRE(ceiling.ok());
      REQUIRE(ceiling->base_pct);
      CAPTURE(sense, name_of(scenario.sensors.scheme), scenario.vehicle.dead_band_pct);
      CHECK(1e-2 * *ceiling->base_pct == Approx(expected).epsilon(0.03));
      CHECK_FALSE(ceiling->open);
      ++compared;
    }
  }
  CHECK(compared == 6);
}

TEST_CASE("beyond the losing base there is no steady state, and below it there is") {
  for (const double kp : {0.1, 0.3}) {
    Scenario scenario = circling(250.0, 1.0);
    scenario.controller.kp = kp;
    const double border = losing_base(scenario, 4.0);
    REQUIRE(border < 1.0);
    scenario.controller.base_pct = 99.5 * border;
    CHECK(held_by_p(scenario, 4.0));
    scenario.controller.base_pct = 100.5 * border;
    CHECK_FALSE(held_by_p(scenario, 4.0));
  }
}

TEST_CASE("I is explained bend by bend, tightest first, with what it costs") {
  Scenario scenario = on_oval();
  scenario.controller.kp = 0.2;
  scenario.controller.ki = 0.002;
  const auto found = explain_integral(scenario);
  if (!found) FAIL(text_of(found.error()));
  REQUIRE(found->bends.size() == 2);
  CHECK(found->bends[0].radius == Approx(0.3));
  CHECK(found->bends[0].left);
  CHECK(found->bends[0].count == 2);
  CHECK(found->bends[0].length == Approx(0.3 * 3.14159265).epsilon(1e-3));
  CHECK(found->bends[0].rough_error == Approx(0.12 * 0.4 / (2.0 * 0.3 * 0.2)));
  CHECK(std::isinf(found->bends[1].radius));
  REQUIRE(found->time);
  CHECK(*found->time == Approx(0.2 * 5e-3 / 0.002));
  CHECK(found->bends[0].integral_in_time);
  CHECK_FALSE(found->tried);
  REQUIRE(found->with.phase);
  CHECK(*found->with.phase < *found->without.phase);  // I costs phase
  CHECK(found->words.find("P alone keeps an error of ") == 0);
  CHECK(found->words.find("It costs margin") != std::string::npos);

  // With I the drive's error at the end of a bend is a small part of what P alone keeps.
  scenario.controller.ki = 0.0;
  const auto alone = explain_integral(scenario);
  REQUIRE(alone.ok());
  CHECK(alone->tried);
  CHECK(alone->tried_ki > 0.0);
  CHECK(alone->words.find("The scenario has no I.") != std::string::npos);

  scenario.controller.kp = 0.0;
  CHECK(text_of(explain_integral(scenario).error()).find("controller.kp: 0: what P keeps") == 0);
}

TEST_CASE("on a circle I drives the error to nothing, which P alone keeps") {
  Scenario scenario = circling(400.0, -1.0);
  const double kept = held_of(scenario, -1.0 / 0.4).error;
  CHECK(settled_row(scenario).error == Approx(kept).epsilon(0.01));
  scenario.controller.ki = 0.003;
  CHECK(std::fabs(settled_row(scenario).error) < 0.01 * std::fabs(kept));
}
