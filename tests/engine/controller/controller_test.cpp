#include "engine/controller/controller.h"

#include <cmath>

#include "tests/catch.h"

using namespace lw;

namespace {

Law<double> law(double kp, double ki, double kd) {
  return {.base = 0.4,
          .ease = 0.0,
          .kp = kp,
          .ki = ki,
          .kd = kd,
          .filter = 0.0,
          .integral_limit = 1.0,
          .steer_limit = 1.0,
          .command_step = 0.0,
          .command_steps_per_unit = 0.0};
}

constexpr double period = 0.01;

Terms<double> step(const Law<double>& settings, LawState<double>& state, double error, bool first = false,
                   LawWiring wiring = {}) {
  return control(settings, wiring, error, period, first, state);
}

}  // namespace

TEST_CASE("P, I and D of a worked sequence") {
  LawState<double> state{};
  const Law<double> settings = law(0.5, 0.1, 2.0);
  Terms<double> terms = step(settings, state, 0.2, true);
  CHECK(terms.p == Approx(0.1));
  CHECK(terms.i == Approx(0.02));  // the integral is updated before it is used
  CHECK(terms.d == 0.0);           // no change is known in the first loop
  terms = step(settings, state, 0.3);
  CHECK(terms.i == Approx(0.05));
  CHECK(terms.d == Approx(0.2));
  CHECK(terms.steer == Approx(0.15 + 0.05 + 0.2));
  CHECK(terms.left == Approx(0.0).margin(1e-15));
  CHECK(terms.right == Approx(0.8));
  CHECK_FALSE(terms.saturated);
}

TEST_CASE("gains per second with ki = Ki / T and kd = Kd T act as gains per loop") {
  LawState<double> loop{}, second{};
  for (int k = 0; k < 50; ++k) {
    const double error = 0.3 * std::sin(0.3 * k);
    const Terms<double> a = step(law(0.2, 0.01, 0.5), loop, error, k == 0);
    const Terms<double> b =
        step(law(0.2, 0.01 / period, 0.5 * period), second, error, k == 0, {.per_second = true});
    CHECK(a.steer == Approx(b.steer).margin(1e-14));
  }
}

TEST_CASE("the D filter approaches its input as a first-order lag of T / (filter + T)") {
  Law<double> settings = law(0.0, 0.0, 1.0);
  settings.filter = 0.03;
  LawState<double> state{};
  step(settings, state, 0.0, true);
  double expected = 0.0;
  for (int k = 1; k < 20; ++k) {
    expected += 0.25 * (0.1 - expected);  // T / (filter + T) = 1/4; the error climbs by 0.1 a loop
    CHECK(step(settings, state, 0.1 * k).d == Approx(expected));
  }
}

TEST_CASE("the integral stops winding up while steer is at its limit and unwinds at once") {
  LawState<double> state{};
  Law<double> settings = law(1.0, 0.2, 0.0);
  settings.steer_limit = 0.5;
  double stuck = step(settings, state, 0.45, true).i;
  CHECK(stuck == 0.0);  // 0.45 + 0.09 is beyond 0.5 and pushes on
  stuck = step(settings, state, 0.3).i;
  CHECK(stuck == Approx(0.06));
  CHECK(step(settings, state, 0.6).i == Approx(stuck));
  const Terms<double> other_way = step(settings, state, -0.2);
  CHECK(other_way.i == Approx(stuck - 0.04));
}

TEST_CASE("integral, steer and commands are held to their limits") {
  LawState<double> state{};
  Law<double> settings = law(0.0, 0.3, 0.0);
  settings.integral_limit = 0.5;
  step(settings, state, 1.0, true);
  CHECK(step(settings, state, 1.0).i == 0.5);
  LawState<double> fresh{};
  const Terms<double> terms = step(law(3.0, 0.0, 0.0), fresh, 0.9, true);
  CHECK(terms.steer == 1.0);
  CHECK(terms.left == Approx(-0.6));
  CHECK(terms.right == 1.0);
  CHECK(terms.saturated);
}

TEST_CASE("commands are rounded to whole steps and stay within full command") {
  LawState<double> state{};
  Law<double> settings = law(1.0, 0.0, 0.0);
  settings.command_step = 0.01;
  settings.command_steps_per_unit = 100.0;
  const Terms<double> terms = control(settings, {.rounding = true}, 0.0734, period, true, state);
  CHECK(terms.left == Approx(0.33));
  CHECK(terms.right == Approx(0.47));
  CHECK(terms.steer == 0.0734);
  settings.command_step = 0.6;
  settings.command_steps_per_unit = 1.0 / 0.6;
  CHECK(control(settings, {.rounding = true}, 0.9, period, true, state).right == 1.0);
}

TEST_CASE("base is eased off with the size of the error and never below zero") {
  LawState<double> state{};
  Law<double> settings = law(0.0, 0.0, 0.0);
  settings.ease = 2.0;
  CHECK(step(settings, state, -0.25, true).left == Approx(0.2));
  CHECK(step(settings, state, 0.75).right == 0.0);
}
