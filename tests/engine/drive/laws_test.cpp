// The closed loop against closed forms of its steady states.
#include <cmath>

#include "engine/drive/drive.h"
#include "tests/catch.h"
#include "tests/engine/drive/courses.h"

using namespace lw;
using namespace lw::test;

namespace {

Summary driven(const Scenario& scenario, Trace* trace = nullptr) {
  const Result<Plan> plan = make_plan(scenario);
  if (!plan) FAIL(text_of(plan.error()));
  return drive(*plan, trace);
}

/// Mean of the error over the last share of the rows.
double late_error(const Trace& trace, double share = 0.5) {
  const auto first = static_cast<std::size_t>((1.0 - share) * static_cast<double>(trace.rows.size()));
  double sum = 0.0;
  for (std::size_t row = first; row < trace.rows.size(); ++row) sum += trace.rows[row].error;
  return sum / static_cast<double>(trace.rows.size() - first);
}

double late_error(const Scenario& scenario) {
  Trace trace;
  const Summary summary = driven(scenario, &trace);
  REQUIRE(summary.outcome == Outcome::finished);
  return late_error(trace);
}

}  // namespace

// A circle of radius R at constant speed needs the wheel speeds base (1 -+ b / 2R), so P alone must keep the
// error e = base b / (2 R kp), positive on a left circle: the proportional offset of any handbook of control.
TEST_CASE("P alone keeps a permanent error on a circle, equal and opposite in the two directions") {
  for (const double kp : {0.2, 0.4}) {
    Scenario left = on_circle(500.0, 1.0), right = on_circle(500.0, -1.0);
    left.controller.kp = right.controller.kp = kp;
    left.drive.laps = right.drive.laps = 2;
    const double expected = 0.4 * 120.0 / (2.0 * 500.0 * kp);
    CHECK(late_error(left) == Approx(expected).epsilon(0.01));
    CHECK(late_error(right) == Approx(-expected).epsilon(0.01));
    CHECK(late_error(left) == Approx(-late_error(right)).epsilon(1e-3));
  }
}

TEST_CASE("PI brings the error on a circle to zero") {
  for (const double sense : {1.0, -1.0}) {
    Scenario scenario = on_circle(500.0, sense);
    scenario.controller.ki = 0.004;
    scenario.drive.laps = 3;
    CHECK(std::fabs(late_error(scenario)) < 1e-3);
  }
}

// Going straight on wheels of radii rL and rR needs (base - s) rL = (base + s) rR: s = base (rL - rR) / (rL +
// rR).
TEST_CASE("unequal wheels keep a permanent error on a straight under P and none under PI") {
  Scenario scenario = on_straight(8000.0);
  scenario.vehicle.wheel_right_mm = 48.0;
  const double expected = 0.4 * (50.0 - 48.0) / (50.0 + 48.0) / 0.3;
  CHECK(late_error(scenario) == Approx(expected).epsilon(0.01));
  scenario.controller.ki = 0.004;
  CHECK(std::fabs(late_error(scenario)) < 1e-3);
}

// Common practice, no source: the offset of P grows with speed until the sensors leave the line; I carries
// it.
TEST_CASE("P alone loses a circle at a speed at which PI still holds it") {
  Scenario scenario = on_circle(250.0, 1.0);
  scenario.controller.kp = 0.12;
  scenario.drive.laps = 2;
  scenario.controller.base_pct = 60.0;
  CHECK(driven(scenario).outcome == Outcome::line_lost);
  scenario.controller.ki = 0.004;
  CHECK(driven(scenario).outcome == Outcome::finished);
}

TEST_CASE("a bar in millimetres keeps the offset of P on a circle") {
  Scenario scenario = on_circle(500.0, 1.0);
  scenario.sensors.scheme = Scheme::bar;
  scenario.sensors.lateral_mm = {30, 20, 10, 0, -10, -20, -30};
  scenario.controller.kp = 0.012;
  scenario.drive.laps = 2;
  CHECK(late_error(scenario) == Approx(0.4 * 120.0 / (2.0 * 500.0 * 0.012)).epsilon(0.02));
}

TEST_CASE("one sensor follows either edge") {
  for (const Edge edge : {Edge::left, Edge::right}) {
    Scenario scenario = on_oval();
    scenario.sensors.scheme = Scheme::edge;
    scenario.sensors.edge = edge;
    scenario.sensors.lateral_mm = {edge == Edge::left ? 10.0 : -10.0};
    const Summary summary = driven(scenario);
    CHECK(summary.outcome == Outcome::finished);
    CHECK(summary.deviation_max < 0.015);
  }
}

TEST_CASE("a figure of eight is driven through its crossing, lap by lap") {
  Scenario scenario = on_eight();
  scenario.drive.laps = 2;
  const Result<Plan> plan = make_plan(scenario);
  REQUIRE(plan.ok());
  const Summary summary = drive(*plan);
  CHECK(summary.outcome == Outcome::finished);
  CHECK(summary.progress == Approx(2.0 * plan->ground->line.length).epsilon(0.01));
  CHECK(summary.deviation_max < 0.02);
}

// Mirroring course and vehicle left to right mirrors the drive.
TEST_CASE("the mirrored scenario gives the mirrored drive") {
  Scenario plain = on_oval(), mirrored = on_oval();
  for (Piece& piece : mirrored.course.pieces) {
    if (piece.turn_deg) piece.turn_deg = -*piece.turn_deg;
  }
  plain.vehicle.wheel_left_mm = mirrored.vehicle.wheel_right_mm = 49.0;
  plain.drive.start_offset_mm = 5.0;
  mirrored.drive.start_offset_mm = -5.0;
  Trace a, b;
  driven(plain, &a);
  driven(mirrored, &b);
  REQUIRE(a.rows.size() == b.rows.size());
  for (std::size_t row = 0; row < a.rows.size(); row += 10) {
    CHECK(a.rows[row].y == Approx(-b.rows[row].y).margin(1e-5));
    CHECK(a.rows[row].deviation == Approx(-b.rows[row].deviation).margin(1e-5));
  }
}
