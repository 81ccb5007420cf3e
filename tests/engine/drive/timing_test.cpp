// When things happen: delay, jitter, refresh, lag, the end of a drive.
#include <cmath>

#include "engine/drive/drive.h"
#include "tests/catch.h"
#include "tests/engine/drive/courses.h"

using namespace lw;
using namespace lw::test;

namespace {

struct Driven {
  Summary summary;
  Trace trace;
  Plan plan;
};

Driven driven(const Scenario& scenario) {
  Result<Plan> plan = make_plan(scenario);
  if (!plan) FAIL(text_of(plan.error()));
  Driven result{{}, {}, *plan};
  result.summary = drive(*plan, &result.trace);
  return result;
}

}  // namespace

TEST_CASE("the trace has one row a loop and ends with the row that ended the drive") {
  const Driven run = driven(on_straight(1000.0));
  REQUIRE(run.summary.outcome == Outcome::finished);
  CHECK(run.trace.rows.size() == static_cast<std::size_t>(run.summary.steps));
  CHECK(run.trace.readings.size() == 2 * run.trace.rows.size());
  CHECK(run.trace.rows.front().t == 0.0);
  CHECK(run.trace.rows.front().progress == Approx(0.070));  // the guide point is ahead of the axle
  CHECK(run.trace.rows.back().t == run.summary.time);
  CHECK(run.trace.rows.back().progress >= 1.0);
  CHECK(run.trace.rows[run.trace.rows.size() - 2].progress < 1.0);
}

// Until the first command acts the wheels stand still; then the speed is that of a first-order lag since that
// moment.
TEST_CASE("a command acts its delay after the loop that computed it, whatever the delay is of the period") {
  for (const double delay_ms : {0.0, 2.0, 5.0, 12.5, 20.0}) {
    Scenario scenario = on_straight();
    scenario.vehicle.command_delay_ms = delay_ms;
    const Driven run = driven(scenario);
    const double full = 0.4 * 200.0 * 2.0 * pi / 60.0 * 0.025, tau = 0.080;
    for (const std::size_t row : {1u, 2u, 4u, 5u, 10u, 40u}) {
      const TraceRow& at = run.trace.rows[row];
      const double acting = std::fmax(0.0, at.t - 1e-3 * delay_ms);
      INFO("delay " << delay_ms << " ms, row " << row);
      CHECK(at.speed == Approx(full * (1.0 - std::exp(-acting / tau))).margin(1e-9));
    }
  }
}

TEST_CASE("delay and jitter together keep the order of commands") {
  Scenario scenario = on_oval();
  scenario.vehicle.command_delay_ms = 7.0;
  scenario.loop.jitter_pct = 60.0;
  scenario.controller.kp = 0.15;
  const Driven run = driven(scenario);
  CHECK(run.summary.outcome == Outcome::finished);
  CHECK(run.summary.deviation_max < 0.03);
}

// A uniform draw on (-1, 1) has variance 1/3.
TEST_CASE("jitter draws each period evenly around the nominal one") {
  Scenario scenario = on_straight(6000.0);
  scenario.loop.jitter_pct = 30.0;
  const Driven run = driven(scenario);
  const std::size_t n = run.trace.rows.size() - 1;
  double sum = 0.0, squares = 0.0;
  for (std::size_t k = 0; k < n; ++k) {
    const double share = (run.trace.rows[k + 1].t - run.trace.rows[k].t) / 0.005 - 1.0;
    CHECK(std::fabs(share) <= 0.3 + 1e-9);
    sum += share;
    squares += share * share;
  }
  const auto count = static_cast<double>(n);
  CHECK(std::fabs(sum / count) < 5.0 * 0.3 / std::sqrt(3.0 * count));
  CHECK(squares / count == Approx(0.09 / 3.0).epsilon(0.15));
}

TEST_CASE("with a refresh time readings change only at the first loop at or after each multiple") {
  Scenario scenario = on_straight();
  scenario.sensors.noise_pct = 2.0;
  scenario.sensors.refresh_ms =
      12.0;  // loops 0, 3, 5, 8, 10, 12 of 5 ms are the first at or after 0, 12, 24, ...
  const Driven run = driven(scenario);
  const bool fresh[] = {true, false, false, true, false, true, false, false, true, false, true, false, true};
  for (std::size_t row = 1; row < std::size(fresh); ++row) {
    CHECK((run.trace.readings[2 * row] != run.trace.readings[2 * row - 2]) == fresh[row]);
  }
}

TEST_CASE("noise has the standard deviation asked for, one draw a sensor and loop") {
  Scenario scenario = on_straight(6000.0);
  scenario.sensors.noise_pct = 1.5;
  scenario.controller.kp = 0.0;  // goes straight on, so that readings differ by noise alone
  const Driven run = driven(scenario);
  const std::size_t n = run.trace.rows.size();
  double sum[2] = {}, squares[2] = {}, product = 0.0;
  const double mean = run.trace.readings.empty() ? 0.0 : 0.1 + 0.8 * 0.5;
  for (std::size_t row = 0; row < n; ++row) {
    const double a = run.trace.readings[2 * row] - mean, b = run.trace.readings[2 * row + 1] - mean;
    sum[0] += a, sum[1] += b, squares[0] += a * a, squares[1] += b * b, product += a * b;
  }
  const auto count = static_cast<double>(n);
  for (int i = 0; i < 2; ++i) {
    const double average = sum[i] / count;
    CHECK(std::sqrt(squares[i] / count - average * average) ==
          Approx(0.015).epsilon(5.0 / std::sqrt(2.0 * count)));
  }
  CHECK(std::fabs((product - sum[0] * sum[1] / count) / count) < 5.0 * 0.015 * 0.015 / std::sqrt(count));
}

TEST_CASE("the sensor low-pass smooths noise by the factor of its pole") {
  Scenario scenario = on_straight(6000.0);
  scenario.sensors.noise_pct = 1.5;
  scenario.sensors.lag_ms = 15.0;  // share a = T / (lag + T) = 1/4
  scenario.controller.kp = 0.0;
  const Driven run = driven(scenario);
  double sum = 0.0, squares = 0.0, count = 0.0;
  for (std::size_t row = 50; row < run.trace.rows.size(); ++row, ++count) {
    const double value = run.trace.readings[2 * row];
    sum += value, squares += value * value;
  }
  const double deviation = std::sqrt(squares / count - sum * sum / count / count);
  // variance of x += a (w - x) with white w: a / (2 - a), e.g. Astrom and Wittenmark, Computer-Controlled
  // Systems, ch. 10
  CHECK(deviation == Approx(0.015 * std::sqrt(0.25 / 1.75)).epsilon(0.15));
}

TEST_CASE("readings are rounded to the step and held to full scale") {
  Scenario scenario = on_straight();
  scenario.sensors.step_pct = 2.0;
  scenario.sensors.noise_pct = 30.0;
  scenario.controller.kp = 0.0;
  const Driven run = driven(scenario);
  for (const double reading : run.trace.readings) {
    CHECK(reading >= 0.0);
    CHECK(reading <= 1.0);
    CHECK(std::fabs(reading / 0.02 - std::round(reading / 0.02)) < 1e-9);
  }
}

TEST_CASE("gain, offset and light act on each reading as described") {
  Scenario scenario = on_straight();
  scenario.sensors.lateral_mm = {200.0, -200.0};  // far from the line: brightness 1
  scenario.sensors.gain = {1.1, 0.9};
  scenario.sensors.offset_pct = {1.0, -2.0};
  scenario.floor.light_pct_per_m = {2.0, 5.0};
  scenario.drive.lost_mm = 300.0;
  const Driven run = driven(scenario);
  for (const std::size_t row : {0u, 20u, 60u}) {
    const TraceRow& at = run.trace.rows[row];
    const double guide_x = at.x + 0.07 * std::cos(at.heading), guide_y = at.y + 0.07 * std::sin(at.heading);
    for (const int side : {0, 1}) {
      const double lateral = side == 0 ? 0.2 : -0.2;
      const double x = guide_x - lateral * std::sin(at.heading), y = guide_y + lateral * std::cos(at.heading);
      const double expected = 0.1 + (side == 0 ? 1.1 * 0.8 + 0.01 : 0.9 * 0.8 - 0.02) + 0.02 * x + 0.05 * y;
      CHECK(run.trace.readings[2 * row + static_cast<std::size_t>(side)] ==
            Approx(std::fmin(expected, 1.0)).margin(1e-4));
    }
  }
}

TEST_CASE("a drive that starts off the line ends at once and says so") {
  Scenario scenario = on_straight();
  scenario.drive.start_offset_mm = 80.0;
  const Driven run = driven(scenario);
  CHECK(run.summary.outcome == Outcome::line_lost);
  CHECK(run.summary.steps == 1);
  CHECK(run.summary.time == 0.0);
  CHECK(reason(run.plan, run.summary, run.trace) ==
        "leaves the line at 0.07 m: it starts off the line on the straight");
}

TEST_CASE("a vehicle that stands still times out and says so") {
  Scenario scenario = on_straight();
  scenario.controller.base_pct = 0.0;
  scenario.drive.time_limit_s = 3.0;
  const Driven run = driven(scenario);
  CHECK(run.summary.outcome == Outcome::time_out);
  CHECK(run.summary.time == Approx(3.0));
  CHECK(run.summary.steps == 601);
  CHECK(reason(run.plan, run.summary, run.trace) == "not finished after 3.0 s: stands still at 0.07 m");
}

TEST_CASE("laps of a closed course add up") {
  Scenario scenario = on_oval();
  const Driven one = driven(scenario);
  scenario.drive.laps = 3;
  const Driven three = driven(scenario);
  const double lap = one.plan.ground->line.length;
  CHECK(one.summary.progress == Approx(lap).epsilon(0.002));
  CHECK(three.summary.progress == Approx(3.0 * lap).epsilon(0.002));
  CHECK(three.summary.time > 2.9 * one.summary.time);
}
