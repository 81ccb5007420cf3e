// Margins, poles and speed limit against one another: each says on its own where the loop swings.
#include "engine/theory/margins.h"

#include <cmath>

#include "engine/numeric/random.h"
#include "engine/theory/margin_map.h"
#include "engine/theory/poles.h"
#include "engine/theory/roots.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

double largest(const SampledLoop& loop) { return std::abs(poles(loop).front()); }

SampledLoop scaled(SampledLoop loop, double factor) {
  loop.gains = {factor * loop.gains.kp, factor * loop.gains.ki, factor * loop.gains.kd};
  return loop;
}

/// A loop out of wide ranges, repeatable by its number.
SampledLoop random_loop(std::uint64_t number) {
  std::uint32_t stream = 0;
  const auto uniform = [&](double low, double high) {
    const Words<double> words = draw<double>(77, number, 0, stream++);
    return low + (high - low) * unit_from<double>(words.word[0]);
  };
  Scenario scenario = cart(std::exp(uniform(0.0, 3.2)), uniform(0.0, 25.0));
  scenario.vehicle.turn_time_constant_ms = uniform(0.0, 150.0);
  scenario.sensors.forward_mm = uniform(20.0, 120.0);
  scenario.sensors.lag_ms = number % 3 == 0 ? uniform(0.0, 15.0) : 0.0;
  scenario.controller.base_pct = uniform(10.0, 95.0);
  scenario.controller.gains = GainUnit::per_second;
  scenario.controller.kp = std::exp(uniform(-5.0, 1.0));
  if (number % 2 == 0) scenario.controller.ki = scenario.controller.kp * uniform(0.0, 3.0);
  if (number % 4 < 2) scenario.controller.kd = scenario.controller.kp * uniform(0.0, 0.15);
  scenario.controller.derivative_filter_ms = uniform(0.0, 40.0);
  return loop_of(scenario);
}

}  // namespace

TEST_CASE("the critical gain puts the slowest poles on the unit circle, at the critical period") {
  for (const Scenario& scenario : all_carts()) {
    const SampledLoop loop = loop_of(scenario);
    const Critical alone = critical(loop);
    REQUIRE(alone.gain);
    const std::vector<std::complex<double>> found = poles(with_gains(loop, {*alone.gain, 0.0, 0.0}));
    CHECK(std::abs(found.front()) == Approx(1.0).margin(1e-9));
    CHECK(2.0 * pi * loop.period / std::fabs(std::arg(found.front())) == Approx(*alone.period).epsilon(1e-7));
  }
}

TEST_CASE("Nyquist's count and the poles agree on stability, and margins end at the unit circle") {
  int stable = 0, lower_ends = 0, margins_of_unstable = 0;
  for (std::uint64_t number = 0; number < 300; ++number) {
    CAPTURE(number);
    const SampledLoop loop = random_loop(number);
    const Margins found = margins(loop);
    CHECK(found.stable == (largest(loop) < 1.0));
    stable += found.stable ? 1 : 0;
    if (found.gain_high) CHECK(largest(scaled(loop, *found.gain_high)) == Approx(1.0).margin(1e-8));
    if (found.gain_low) CHECK(largest(scaled(loop, *found.gain_low)) == Approx(1.0).margin(1e-8));
    lower_ends += found.gain_low ? 1 : 0;
    margins_of_unstable += !found.stable && found.gain_high ? 1 : 0;
    if (found.stable) {
      CHECK(*found.gain_high > 1.0);
      CHECK(found.gain_low.value_or(0.5) < 1.0);
      for (const double share : {0.2, 0.9})  // stable all the way
        CHECK(largest(scaled(loop, 1.0 + share * (*found.gain_high - 1.0))) < 1.0);
    }
  }
  CHECK(stable > 60);  // the loops are of both kinds
  CHECK(stable < 240);
  CHECK(lower_ends > 60);
  CHECK(margins_of_unstable > 20);
}

// The margin counts a pure delay in the open loop's response; a delayed command is held on as well, which
// differs a little where the swing is fast against the period. 0.2 rad a period is some 30 loops a swing.
TEST_CASE("a command delayed by the delay margin makes the loop swing") {
  int compared = 0;
  for (const Scenario& scenario : all_carts()) {
    const SampledLoop loop = loop_of(scenario);
    const Margins found = margins(loop);
    if (!found.delay || found.phase_omega * loop.period > 0.5 || *found.delay > 100.0 * loop.period) continue;
    const auto largest_with = [&](double delay) {
      SampledLoop later = loop;
      later.delay += delay;
      sample(later);
      return largest(later) - 1.0;
    };
    const double swings = bracketed_root(largest_with, 0.5 * *found.delay, 2.0 * *found.delay, 1e-9);
    const bool slow = found.phase_omega * loop.period < 0.2;
    CHECK(*found.delay == Approx(swings).epsilon(slow ? 0.01 : 0.03));
    ++compared;
  }
  CHECK(compared >= 6);
}

// Bode's and Nyquist's geometry: |1 + L| is at least 1 / peak at both crossings, so that gain margin >= Ms /
// (Ms
// - 1) and phase margin >= 2 asin(1 / (2 Ms)) (Astrom and Murray, "Feedback Systems").
TEST_CASE("the sensitivity peak bounds gain and phase margin, and is the highest of its curve") {
  int seen = 0;
  for (std::uint64_t number = 0; number < 100; ++number) {
    const SampledLoop loop = random_loop(number);
    const Margins found = margins(loop);
    if (!found.stable) continue;
    ++seen;
    const double peak = *found.sensitivity_peak;
    CHECK(*found.gain_high >= peak / (peak - 1.0) * (1.0 - 1e-9));
    if (found.phase) CHECK(std::fabs(*found.phase) >= 2.0 * std::asin(0.5 / peak) * (1.0 - 1e-9));
    const ResponseCurve curve = response_curve(loop);
    double highest = 0.0;
    for (const double value : curve.sensitivity) highest = std::max(highest, value);
    CHECK(highest == Approx(peak).epsilon(1e-9));
  }
  CHECK(seen > 20);
}

TEST_CASE("small gains of P alone are stable exactly below the speed limit") {
  for (const Scenario& scenario : all_carts()) {
    SampledLoop loop = loop_of(scenario);
    const SpeedLimit limit = speed_limit(loop);
    for (const double share : {0.99, 1.01}) {
      loop.speed = share * limit.speed;
      sample(loop);
      const double kp = 1e-5 / (loop.slope * loop.yaw_gain * loop.speed * loop.period);
      CHECK((largest(with_gains(loop, {kp, 0.0, 0.0})) < 1.0) == (share < 1.0));
    }
  }
}

TEST_CASE("above the speed limit there is no critical gain, and the reason has the numbers") {
  SampledLoop loop = loop_of(cart(5.0, 20.0));
  set_base(loop, 3.0 * speed_limit(loop).base);
  const Critical alone = critical(loop);
  CHECK_FALSE(alone.gain);
  CHECK(alone.reason.find("P alone is stable at no small gain above") != std::string::npos);
  CHECK_FALSE(margins(loop).stable);
}

TEST_CASE("poles keep their digits at short periods and with long delays") {
  // Characteristic polynomial of a double integrator under P with lead, by hand: s^2 + k (n1 s + n0) = 0.
  SampledLoop loop = loop_of(cart(0.1, 0.0));
  loop.turn_time = 0.0;
  sample(loop);
  const double b = 0.3 * loop.slope * loop.plant.n0[1], c = 0.3 * loop.slope * loop.plant.n0[0];
  const std::complex<double> root = -0.5 * b + std::sqrt(std::complex<double>(0.25 * b * b - c));
  CHECK(std::abs(poles(loop).front() - 1.0 - root) < 1e-12 * std::abs(root));

  const SampledLoop delayed = loop_of(cart(0.1, 20.0));
  const auto many = poles(delayed);
  CHECK(many.size() == 203);
  CHECK((std::abs(many.front()) < 1.0) == margins(delayed).stable);
  CHECK(poles(loop_of(cart(0.1, 100.0))).empty());  // a thousand and more are not worked out
}

// Each waiting period adds a crossing; the sweep ends before they do.
TEST_CASE("a delay of ten thousand periods has its critical gain") {
  SampledLoop slow = loop_of(cart(10.0, 1000.0)), fast = loop_of(cart(0.1, 1000.0));
  set_base(slow, 0.05);  // slow enough for the forward offset to outweigh a second
  set_base(fast, 0.05);
  REQUIRE((critical(slow).gain && critical(fast).gain));
  // half a period later at 10 ms; otherwise the same vehicle
  CHECK(*critical(fast).gain == Approx(*critical(slow).gain).epsilon(0.05));
  CHECK_FALSE(margins(fast).stable);
}

TEST_CASE("the map has in each cell what the loop of that cell has") {
  Scenario scenario = cart(5.0, 7.5);
  scenario.controller.ki = 0.002;
  const std::vector<double> kp{0.05, 0.2, 0.8}, base{0.0, 0.2, 0.5, 0.8};
  const MarginMap map = margin_map(loop_of(scenario), kp, base);
  REQUIRE(map.stable.size() == 12);
  REQUIRE(map.critical.size() == 4);
  for (std::size_t row = 0; row < base.size(); ++row) {
    for (std::size_t column = 0; column < kp.size(); ++column) {
      const std::size_t cell = row * kp.size() + column;
      if (row == 0) {
        CHECK(std::isnan(map.gain_db[cell]));
        CHECK(map.stable[cell] == 0);
        continue;
      }
      scenario.controller.kp = kp[column];
      scenario.controller.base_pct = 1e2 * base[row];
      const Margins at = margins(loop_of(scenario));
      CHECK((map.stable[cell] == 1) == at.stable);
      CHECK(std::isnan(map.gain_db[cell]) == !at.gain_high);
      if (at.gain_high) CHECK(map.gain_db[cell] == Approx(decibels(*at.gain_high)).epsilon(1e-9));
      CHECK(map.phase[cell] == Approx(*at.phase).epsilon(1e-9));
      CHECK(map.critical[row] == Approx(*critical(loop_of(scenario)).gain).epsilon(1e-9));
    }
  }
}
