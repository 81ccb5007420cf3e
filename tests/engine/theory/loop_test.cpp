// The sampled vehicle and its margins against published forms.
#include "engine/theory/loop.h"

#include <cmath>

#include "engine/numeric/functions.h"
#include "engine/theory/margins.h"
#include "engine/theory/poles.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;
using Complex = std::complex<double>;

namespace {

/// A loop by its constants alone, slope 1, P with gain 1.
SampledLoop bare(double speed, double yaw_gain, double turn_time, double forward, double period,
                 double delay) {
  SampledLoop loop;
  loop.speed = speed;
  loop.yaw_gain = yaw_gain;
  loop.turn_time = turn_time;
  loop.forward = forward;
  loop.period = period;
  loop.delay = delay;
  loop.slope = 1.0;
  loop.gains.kp = 1.0;
  sample(loop);
  return loop;
}

Complex z_at(const SampledLoop& loop, double omega) { return std::polar(1.0, omega * loop.period); }

void check_close(Complex a, Complex b, double relative) { CHECK(std::abs(a - b) < relative * std::abs(b)); }

}  // namespace

// Astrom and Wittenmark, "Computer-Controlled Systems", table of sampled systems (from memory): the double
// integrator 1/s^2 becomes h^2 (z + 1) / (2 (z - 1)^2), and 1/(s (s + 1)) becomes
// ((e^-h - 1 + h) z + 1 - e^-h - h e^-h) / ((z - 1) (z - e^-h)).
TEST_CASE("the sampled vehicle is the table's double integrator and motor") {
  for (const double h : {0.01, 0.3, 1.0}) {
    const SampledLoop twice = bare(1.0, 1.0, 0.0, 0.0, h, 0.0);
    const SampledLoop motor = bare(0.0, 1.0, 1.0, 1.0, h, 0.0);
    for (const double omega : {0.05 / h, 1.0 / h, 3.0 / h}) {
      const Complex z = z_at(twice, omega);
      check_close(path_response(twice, omega), h * h * (z + 1.0) / (2.0 * (z - 1.0) * (z - 1.0)), 1e-10);
      const double e = std::exp(-h);
      check_close(path_response(motor, omega),
                  ((e - 1.0 + h) * z + (1.0 - e - h * e)) / ((z - 1.0) * (z - e)), 1e-10);
    }
  }
}

// The same book, double integrator with a delay of less than a period (from memory): with states position and
// speed the command acts through ((h - tau)^2 / 2, h - tau), the one before it through (tau (h - tau / 2),
// tau).
TEST_CASE("a delay within a period splits the double integrator's input as in the book") {
  const double h = 1.0, tau = 0.35;
  const SampledLoop loop = bare(1.0, 1.0, 0.0, 0.0, h, tau);
  for (const double omega : {0.1, 1.0, 2.5}) {
    const Complex z = z_at(loop, omega), s = z - 1.0;
    const Complex position = 0.5 * (h - tau) * (h - tau) + tau * (h - 0.5 * tau) / z;
    const Complex speed = (h - tau) + tau / z;
    check_close(path_response(loop, omega), (s * position + h * speed) / (s * s), 1e-12);
  }
  const SampledLoop later = bare(1.0, 1.0, 0.0, 0.0, h, tau + 3.0);
  check_close(path_response(later, 1.0), path_response(loop, 1.0) * std::pow(z_at(loop, 1.0), -3.0), 1e-12);
}

// Astrom and Murray, "Feedback Systems", vehicle steering: normalised, lateral position over steering angle
// is (gamma s + 1) / s^2. Under P its closed loop is s^2 + gamma k s + k: natural frequency sqrt(k), damping
// gamma sqrt(k) / 2, phase margin atan(gamma w) at |L(w)| = 1. The sampled loop tends there as h -> 0.
TEST_CASE("at short periods the loop is the vehicle-steering example") {
  const double gamma = 0.5, k = 2.0, h = 1e-5;
  SampledLoop loop = bare(1.0, 1.0, 0.0, gamma, h, 0.0);
  loop.gains.kp = k;
  const Complex s(0.0, 1.7);
  check_close(path_response(loop, 1.7), (gamma * s + 1.0) / (s * s), 1e-4);
  const PoleMotion motion = motion_of(poles(loop).front(), h);
  CHECK(motion.frequency == Approx(std::sqrt(k)).epsilon(1e-4));
  CHECK(motion.damping == Approx(0.5 * gamma * std::sqrt(k)).epsilon(1e-4));
  const double square = 0.5 * (k * k * gamma * gamma + std::sqrt(std::pow(k * gamma, 4) + 4.0 * k * k));
  const Margins found = margins(loop);
  CHECK(found.phase_omega == Approx(std::sqrt(square)).epsilon(1e-4));
  CHECK(*found.phase == Approx(std::atan(gamma * std::sqrt(square))).epsilon(1e-4));
}

// Ziegler and Nichols 1942: an integrator K / s with dead time L swings at the gain pi / (2 K L) with the
// period 4 L. Held over h it is as late as L + h / 2, and its gain at w is K h / (2 sin(w h / 2)), both
// exactly.
TEST_CASE("a vehicle with sensors far ahead is the integrator with dead time of Ziegler and Nichols") {
  const double yaw = 3.0, forward = 2.0, delay = 0.02;
  for (const double h : {1e-4, 0.004, 0.02}) {
    const Critical alone = critical(bare(1e-9, yaw, 0.0, forward, h, delay));
    REQUIRE(alone.gain);
    const double late = delay + 0.5 * h, omega = pi / (2.0 * late), k = yaw * forward;
    CHECK(*alone.period == Approx(4.0 * late).epsilon(1e-6));
    CHECK(*alone.gain == Approx(2.0 * std::sin(0.5 * omega * h) / (k * h)).epsilon(1e-6));
    if (h == 1e-4) {
      CHECK(*alone.gain == Approx(pi / (2.0 * k * delay)).epsilon(0.003));
      CHECK(*alone.period == Approx(4.0 * delay).epsilon(0.003));
    }
  }
}

// Without delay a sampled integrator under P has one pole, 1 - k K h, which leaves at z = -1 for k K h = 2.
TEST_CASE("a loop slow against its vehicle swings from one period to the next") {
  const Critical alone = critical(bare(1e-9, 3.0, 0.0, 2.0, 0.05, 0.0));
  REQUIRE(alone.gain);
  CHECK(*alone.gain == Approx(2.0 / (3.0 * 2.0 * 0.05)).epsilon(1e-6));
  CHECK(*alone.period == Approx(2.0 * 0.05).epsilon(1e-12));
}

TEST_CASE("gains per second are the same loop as gains per loop") {
  Scenario per_loop = cart(8.0, 3.0), per_second = per_loop;
  per_loop.controller.ki = 0.004, per_loop.controller.kd = 2.0;
  per_second.controller.gains = GainUnit::per_second;
  per_second.controller.ki = 0.004 / 0.008, per_second.controller.kd = 2.0 * 0.008;
  check_close(response(loop_of(per_loop), 11.0), response(loop_of(per_second), 11.0), 1e-12);
}

// Ages of readings kept for n loops are 0 to n - 1 periods, in the mean (n - 1) T / 2; with a refresh of 1.5
// periods one loop and two take turns, and one loop in three reads what is a period old.
TEST_CASE("a refresh slower than the loop counts with its mean extra age") {
  const auto delay_with = [](double refresh_ms) {
    Scenario scenario = cart(4.0, 0.0);
    scenario.sensors.refresh_ms = refresh_ms;
    return loop_of(scenario).delay;
  };
  CHECK(delay_with(4.0) == 0.0);
  CHECK(delay_with(3.0) == 0.0);
  CHECK(delay_with(20.0) == Approx(0.5 * 4.0 * 4e-3).epsilon(1e-12));
  CHECK(delay_with(6.0) == Approx(4e-3 / 3.0).epsilon(1e-12));
}

TEST_CASE("at full base steer has half its effect") {
  Scenario scenario = cart(5.0, 0.0);
  scenario.controller.base_pct = 99.999999;
  const double nearly = loop_of(scenario).yaw_gain;
  scenario.controller.base_pct = 100.0;
  CHECK(loop_of(scenario).yaw_gain == Approx(0.5 * nearly).epsilon(1e-6));
}

TEST_CASE("notes name what the linear loop leaves out, and nothing else") {
  Scenario scenario = cart(5.0, 0.0);
  CHECK(loop_of(scenario).notes.size() == 1);  // saturation
  scenario.sensors.step_pct = 1.0;
  scenario.vehicle.command_step_pct = 1.0;
  scenario.vehicle.wheel_left_mm = 49.0;
  scenario.loop.jitter_pct = 10.0;
  scenario.controller.ease = 0.5;
  scenario.sensors.refresh_ms = 12.0;
  CHECK(loop_of(scenario).notes.size() == 7);
}
