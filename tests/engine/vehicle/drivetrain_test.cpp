#include "engine/vehicle/drivetrain.h"

#include <cmath>

#include "tests/catch.h"

using namespace lw;

namespace {

// A library cart: 300 mm track, 40 mm wheel radius, 20 rad/s at full command.
Drivetrain<double> cart(double radius_left = 0.040, double radius_right = 0.040) {
  const double track = 0.3;
  return {.speed_per_common = 0.5 * (radius_right + radius_left),
          .speed_per_difference = 0.5 * (radius_right - radius_left),
          .yaw_per_common = (radius_right - radius_left) / track,
          .yaw_per_difference = (radius_right + radius_left) / track,
          .dead_band = 0.0,
          .speed_past_dead_band = 20.0,
          .forward_time = 0.09,
          .turn_time = 0.05,
          .slide_limit = HUGE_VAL};
}

Motion<double> moved(const Drivetrain<double>& train, Motion<double> motion, double left, double right,
                     double time, int pieces) {
  const Interval<double> interval = make_interval(train, time / pieces);
  const WheelTarget<double> target = wheel_target(train, left, right);
  for (int i = 0; i < pieces; ++i) advance(train, interval, target, motion);
  return motion;
}

}  // namespace

// Zero-order hold of a / (s (s + a)) with gain 1, sampled with h (Astrom and Wittenmark, Computer-Controlled
// Systems, table of sampled systems; from memory):
//   y(k) = (1 + e) y(k-1) - e y(k-2) + b1 u(k-1) + b2 u(k-2),  e = exp(-a h),
//   b1 = (a h - 1 + e) / a,  b2 = (1 - e - a h e) / a.
TEST_CASE("heading follows the zero-order hold of a lag and an integrator") {
  const Drivetrain<double> train = cart();
  const double h = 0.02, a = 1.0 / train.turn_time, e = std::exp(-a * h);
  const double b1 = (a * h - 1.0 + e) / a, b2 = (1.0 - e - a * h * e) / a;
  const double gain = train.yaw_per_difference * train.speed_past_dead_band;
  const double command[] = {0.3, -0.2, 0.9, 0.05, 0.4, -0.7, 0.1, 0.0, 0.6};
  Motion<double> motion{};
  double y1 = 0.0, y2 = 0.0, u1 = 0.0;
  const Interval<double> interval = make_interval(train, h);
  for (const double u : command) {
    advance(train, interval, wheel_target(train, -u, u), motion);
    const double y = (1.0 + e) * y1 - e * y2 + gain * (b1 * u + b2 * u1);
    CHECK(motion.heading == Approx(y).epsilon(1e-12));
    y2 = y1, y1 = y, u1 = u;
  }
}

// First-order step response: distance r W (t - T (1 - exp(-t/T))).
TEST_CASE("a straight start covers the distance of a first-order lag") {
  const Drivetrain<double> train = cart();
  const Motion<double> motion = moved(train, {}, 0.5, 0.5, 0.35, 14);
  const double speed = 0.040 * 0.5 * 20.0;
  CHECK(motion.x == Approx(speed * (0.35 - 0.09 * (1.0 - std::exp(-0.35 / 0.09)))).epsilon(1e-9));
  CHECK(motion.y == 0.0);
  CHECK(motion.heading == 0.0);
}

TEST_CASE("a lag of zero follows at once") {
  Drivetrain<double> train = cart();
  train.forward_time = train.turn_time = 0.0;
  const Motion<double> motion = moved(train, {}, 0.5, 0.5, 0.1, 3);
  CHECK(motion.common == 10.0);
  CHECK(motion.x == Approx(0.04 * 10.0 * 0.1).epsilon(1e-12));
}

// The error of three-point Gauss-Legendre over a composite interval falls with the sixth power of its length
// (Abramowitz and Stegun 25.4.30: remainder proportional to the sixth derivative).
TEST_CASE("position converges with the sixth power of the interval") {
  const Drivetrain<double> train = cart();
  const Motion<double> start{0.0, 0.0, 0.3, 4.0, -2.0};
  const Motion<double> exact = moved(train, start, -0.2, 0.8, 0.4, 512);
  double before = 0.0;
  for (const int pieces : {8, 16, 32}) {
    const Motion<double> motion = moved(train, start, -0.2, 0.8, 0.4, pieces);
    const double error = std::hypot(motion.x - exact.x, motion.y - exact.y);
    CHECK(motion.heading == Approx(exact.heading).epsilon(1e-13));
    if (before > 0.0) {
      INFO(pieces << " pieces, error " << error << " after " << before);
      CHECK(before / error > 50.0);
      CHECK(before / error < 80.0);
    }
    before = error;
  }
}

// Borenstein and Feng 1996, Measurement and correction of systematic odometry errors in mobile robots
// (UMBmark): on a commanded straight, wheels of diameters DR and DL drive an arc of radius R with DR / DL =
// (R + b/2) / (R - b/2).
TEST_CASE("unequal wheels drive the arc of UMBmark") {
  const double left = 0.0398, right = 0.0402, track = 0.3;
  Drivetrain<double> train = cart(left, right);
  train.forward_time = train.turn_time = 0.0;  // at speed from the start
  const Motion<double> motion = moved(train, {}, 0.5, 0.5, 6.0, 200);
  // an arc that starts along x: chord and the angle it subtends give the radius
  const double radius = std::hypot(motion.x, motion.y) / (2.0 * std::sin(0.5 * motion.heading));
  CHECK(right / left == Approx((radius + track / 2) / (radius - track / 2)).epsilon(1e-9));
  CHECK(motion.heading > 0.0);
}

TEST_CASE("equal and opposite commands turn on the spot") {
  const Motion<double> motion = moved(cart(), {}, -0.4, 0.4, 1.0, 50);
  CHECK(std::hypot(motion.x, motion.y) < 1e-15);
  CHECK(motion.heading > 1.0);
}

TEST_CASE("a command inside the dead band turns no wheel, and full command is full speed") {
  Drivetrain<double> train = cart();
  train.dead_band = 0.2;
  train.speed_past_dead_band = 20.0 / (1.0 - 0.2);
  CHECK(wheel_target(train, 0.15, 0.2).common == 0.0);
  CHECK(wheel_target(train, 1.0, 1.0).common == Approx(20.0));
  CHECK(wheel_target(train, -0.6, -0.6).common == Approx(-10.0));
}

// Friction limit of a level turn: v * yaw rate <= mu g, standard gravity 9.80665 m/s^2 (ISO 80000-3).
TEST_CASE("tyres that slide hold the yaw rate to the friction limit") {
  Drivetrain<double> train = cart();
  train.forward_time = train.turn_time = 0.0;
  train.slide_limit = 0.1 * 9.80665;
  const WheelTarget<double> target = wheel_target(train, 0.5, 1.0);
  const double speed = 0.04 * 15.0, wished = train.yaw_per_difference * 5.0;
  REQUIRE(speed * wished > 0.5);
  Motion<double> motion{};
  const Interval<double> interval = make_interval(train, 0.01);
  CHECK_FALSE(advance(train, interval, target, motion));
  train.slide_limit = 0.03 * 9.80665;
  motion = {};
  CHECK(advance(train, interval, target, motion));
  CHECK(motion.heading == Approx(0.03 * 9.80665 / speed * 0.01).epsilon(1e-12));
  CHECK(motion.difference == 5.0);
}

TEST_CASE("a pack of drives moves each like one alone") {
  using L = Pack<4>;
  const Drivetrain<double> one = cart(0.0398, 0.0402);
  Drivetrain<L> four;
  static_assert(sizeof four == 4 * sizeof one);
  for (std::size_t field = 0; field < sizeof one / sizeof(double); ++field) {
    reinterpret_cast<L*>(&four)[field] = all_lanes<L>(reinterpret_cast<const double*>(&one)[field]);
  }
  four.slide_limit = L{HUGE_VAL, 0.3, 0.5, HUGE_VAL};
  const L left{0.1, 0.5, 0.9, -0.3}, right{0.2, 1.0, 0.4, 0.3};
  Motion<L> motion{};
  for (int step = 0; step < 50; ++step) {
    advance(four, make_interval(four, all_lanes<L>(0.013)), wheel_target(four, left, right), motion);
  }
  for (int i = 0; i < 4; ++i) {
    Drivetrain<double> alone = one;
    alone.slide_limit = four.slide_limit[i];
    Motion<double> single{};
    for (int step = 0; step < 50; ++step) {
      advance(alone, make_interval(alone, 0.013), wheel_target(alone, double(left[i]), double(right[i])),
              single);
    }
    CHECK(motion.x[i] == single.x);
    CHECK(motion.y[i] == single.y);
    CHECK(motion.heading[i] == single.heading);
  }
}
