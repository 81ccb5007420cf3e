// The case for or against D: the noise it costs held against drives, and verdicts that go both ways.
#include "engine/tuning/derivative.h"

#include <cmath>

#include "engine/theory/margins.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

LoopNoise noise_of(const Scenario& scenario) {
  const SampledLoop loop = loop_of(scenario);
  const auto noise = loop_noise(loop, error_noise(scenario, loop));
  REQUIRE(noise);
  return *noise;
}

struct Wander {
  double steer, deviation;
};

/// Standard deviations over a long straight, once settled.
Wander measured(Scenario scenario) {
  scenario.course.pieces = {{.straight_mm = 60000.0}};
  scenario.drive.time_limit_s = 600.0;
  const auto plan = make_plan(scenario);
  if (!plan) FAIL(text_of(plan.error()));
  Trace trace;
  drive(*plan, &trace);
  double steer = 0.0, deviation = 0.0, rest = 0.0;
  std::size_t count = 0;
  for (const TraceRow& row : trace.rows) rest += row.deviation / static_cast<double>(trace.rows.size());
  for (const TraceRow& row : trace.rows) {
    if (row.t < 5.0) continue;
    steer += row.steer * row.steer;
    deviation += std::pow(row.deviation - rest, 2);
    ++count;
  }
  REQUIRE(count > 20000);
  return {std::sqrt(steer / static_cast<double>(count)), std::sqrt(deviation / static_cast<double>(count))};
}

Scenario noisy_cart(double noise_pct) {
  Scenario scenario = cart(4.0, 2.0);
  scenario.sensors.noise_pct = noise_pct;
  scenario.sensors.spot_mm = 24.0;  // wide, so that the slope hardly changes where the noise takes the cart
  scenario.sensors.lateral_mm = {19.5, -19.5};
  scenario.course.line_mm = 39.0;
  return scenario;
}

DerivativeCase weighed(const Scenario& scenario) {
  const auto found = weigh_derivative(scenario);
  if (!found) FAIL(text_of(found.error()));
  UNSCOPED_INFO(found->words);
  return *found;
}

/// A fast loop over fine readings, sensors hardly ahead of the axle: a tram with its bogie in front.
Scenario in_need() {
  Scenario scenario = on_oval();
  scenario.loop.period_ms = 2.0;
  scenario.sensors.forward_mm = 40.0;
  scenario.sensors.step_pct = 0.1;
  scenario.sensors.noise_pct = 0.05;
  scenario.controller.base_pct = 60.0;
  scenario.controller.kp = 0.25;
  return scenario;
}

/// The same over coarse, noisy readings and with its sensors far ahead.
Scenario in_no_need() {
  Scenario scenario = in_need();
  scenario.sensors.forward_mm = 150.0;
  scenario.sensors.step_pct = 4.0;
  scenario.sensors.noise_pct = 3.0;
  scenario.controller.base_pct = 40.0;
  return scenario;
}

}  // namespace

TEST_CASE("noise on steer and deviation is what a long drive on a straight shows") {
  Scenario p = noisy_cart(2.0);
  Scenario pd = p;
  pd.controller.kd = 4.0 * pd.controller.kp;
  pd.controller.derivative_filter_ms = 6.0;
  Scenario pid = pd;
  pid.controller.ki = 0.002;
  pid.sensors.lag_ms = 5.0;
  Scenario stale = p;
  stale.sensors.refresh_ms = 12.0;  // three periods
  Scenario bar = p;
  bar.sensors.scheme = Scheme::bar;
  bar.sensors.lateral_mm = {36.0, 19.5, -19.5, -36.0};
  bar.course.line_mm = 54.0;  // all four spots over an edge
  bar.controller.kp = 0.01;
  for (const Scenario& scenario : {p, pd, pid, stale, bar}) {
    const LoopNoise predicted = noise_of(scenario);
    const Wander seen = measured(scenario);
    CAPTURE(scenario.controller.kd, scenario.controller.ki, scenario.sensors.refresh_ms);
    CHECK(seen.steer == Approx(predicted.steer).epsilon(0.04));
    CHECK(seen.deviation == Approx(predicted.deviation).epsilon(0.15));  // slow, so few independent values
    CHECK(predicted.from_rounding == 0.0);
  }
}

TEST_CASE("readings rounded coarsely, and kept moving by noise, are as noisy as step^2 / 12 says") {
  // Bennett 1948; Widrow and Kollar 2008: with noise of half a step the rounding error is white.
  Scenario scenario = noisy_cart(1.5);
  scenario.sensors.step_pct = 3.0;
  scenario.controller.kd = 3.0 * scenario.controller.kp;
  const LoopNoise predicted = noise_of(scenario);
  CHECK(measured(scenario).steer == Approx(predicted.steer).epsilon(0.04));
  CHECK(predicted.from_rounding / predicted.from_readings == Approx(2.0 / std::sqrt(12.0)).epsilon(1e-6));
  CHECK(std::hypot(predicted.from_rounding, predicted.from_readings) == Approx(predicted.steer));
}

TEST_CASE("with a gain of nothing the steer's noise is nothing, and with a small one Kp times the error's") {
  Scenario scenario = noisy_cart(2.0);
  scenario.controller.kp = 1e-4;  // the loop is so slow that it passes the noise on as it is
  CHECK(noise_of(scenario).steer == Approx(1e-4 * std::sqrt(2.0) * 0.02).epsilon(0.01));
  scenario.controller.kp = 40.0;
  const SampledLoop loop = loop_of(scenario);
  CHECK_FALSE(margins(loop).stable);
  CHECK_FALSE(loop_noise(loop, error_noise(scenario, loop)));
}

TEST_CASE("D pays for a fast loop over fine readings whose sensors lie hardly ahead of the axle") {
  const Scenario scenario = in_need();
  const DerivativeCase found = weighed(scenario);
  CHECK(found.pays());
  REQUIRE(found.best);
  CHECK(found.words.find("D pays. Kd ") == 0);
  CHECK(found.words.find(" of derivative already, without noise") != std::string::npos);
  CHECK((!found.without.stable || found.best->peak < 0.9 * found.without.peak));
  CHECK(found.best->noise.steer <= found.noise_allowed);
  CHECK(found.lead == Approx(40.0 / (0.6 * 523.599)).epsilon(1e-4));  // forward over speed

  // What it says of the loop and the drive is so.
  Scenario with = scenario;
  with.controller = with_derivative(scenario, *found.best);
  const Margins there = margins(loop_of(with));
  REQUIRE(there.stable);
  CHECK(*there.sensitivity_peak == Approx(found.best->peak).epsilon(1e-9));
  const auto plan = make_plan(with);
  REQUIRE(plan.ok());
  CHECK(drive(*plan).deviation_max == found.drive_with.deviation_max);
  CHECK(found.drive_with.deviation_rms < found.drive_without.deviation_rms);
}

TEST_CASE("D does not pay over coarse noisy readings with the sensors far ahead") {
  const DerivativeCase found = weighed(in_no_need());
  CHECK_FALSE(found.pays());
  CHECK(found.words.find("D does not pay") == 0);
  CHECK(found.words.find(" of derivative already, without noise") != std::string::npos);
}

TEST_CASE("noise alone turns the verdict round, with the loop and the course as they were") {
  Scenario scenario = in_need();
  REQUIRE(weighed(scenario).pays());
  scenario.sensors.noise_pct = 6.0;
  const DerivativeCase found = weighed(scenario);
  CHECK(found.verdict == DerivativeVerdict::too_noisy);
  CHECK_FALSE(found.best);
  REQUIRE(found.sharpest);
  CHECK(found.sharpest->noise.steer > found.noise_allowed);
}

TEST_CASE("a grid point's noise grows with D and falls with its filter") {
  const DerivativeCase found = weighed(in_need());
  const DerivativeSettings settings;
  REQUIRE(found.grid.size() == static_cast<std::size_t>(settings.strengths * settings.filters));
  const auto point = [&](int strength, int filter) -> const DerivativePoint& {
    return found.grid[static_cast<std::size_t>(strength * settings.filters + filter)];
  };
  int compared = 0;
  for (int i = 6; i + 1 < settings.strengths; ++i) {
    const DerivativePoint &weak = point(i, 0), &strong = point(i + 1, 0), &calm = point(i, 3);
    if (!weak.stable || !strong.stable || !calm.stable) continue;
    ++compared;
    CHECK(strong.noise.steer > weak.noise.steer);
    CHECK(calm.noise.steer < weak.noise.steer);
  }
  CHECK(compared >= 3);
}

TEST_CASE("D is weighed in the unit that the controller uses") {
  Scenario scenario = in_need();
  const DerivativeCase loops = weighed(scenario);
  scenario.controller.gains = GainUnit::per_second;  // without I and D nothing else changes
  const DerivativeCase seconds = weighed(scenario);
  REQUIRE(loops.best);
  REQUIRE(seconds.best);
  CHECK(seconds.best->kd == loops.best->kd);
  const Controller controller = with_derivative(scenario, *seconds.best);
  CHECK(controller.kd == Approx(loops.best->kd * 2e-3));
  CHECK(seconds.drive_with.deviation_rms == Approx(loops.drive_with.deviation_rms).epsilon(1e-6));
}

TEST_CASE("without a P gain there is nothing to weigh D beside") {
  Scenario scenario = in_need();
  scenario.controller.kp = 0.0;
  const auto found = weigh_derivative(scenario);
  REQUIRE_FALSE(found.ok());
  CHECK(text_of(found.error()).find("controller.kp: 0: D is weighed beside a P gain") == 0);
}
