// Reading an oscillation out of samples, against samples made from known ones.
#include "engine/tuning/oscillation.h"

#include <cmath>

#include "tests/catch.h"

using namespace lw;

namespace {

struct Samples {
  std::vector<double> t, x;
};

/// A swing of 1 at the end, on top of an offset and a drift.
Samples swinging(double period, double growth, double step, double seconds, double offset, double drift) {
  Samples samples;
  for (double t = 0.0; t < seconds; t += step) {
    samples.t.push_back(t);
    samples.x.push_back(std::exp(growth * (t - seconds)) * std::sin(2.0 * M_PI * t / period + 0.3) + offset +
                        drift * t);
  }
  return samples;
}

}  // namespace

TEST_CASE("period, growth and amplitude of a swing are read, however few its samples a period") {
  for (const double step : {0.001, 0.02, 0.11}) {
    for (const double growth : {-0.2, 0.0, 0.15}) {
      CAPTURE(step, growth);
      const double period = 0.4713;
      const Samples made = swinging(period, growth, step, 8.0, 0.7, 0.0);
      const auto found = oscillation_of(made.t, made.x, 1.03 * period, 5);
      REQUIRE(found);
      CHECK(found->period == Approx(period).epsilon(2e-4));
      CHECK(found->growth == Approx(growth).margin(0.01));
      const double middle = std::exp(-growth * 5.0 * period);  // where the two stretches meet
      CHECK(found->amplitude == Approx(middle).epsilon(0.02));
    }
  }
}

TEST_CASE("an offset and a drift are no part of a swing") {
  const Samples made = swinging(0.5, 0.0, 0.01, 8.0, 30.0, 0.5);
  const auto found = oscillation_of(made.t, made.x, 0.5, 5);
  REQUIRE(found);
  CHECK(found->amplitude == Approx(1.0).epsilon(0.01));
  CHECK(found->growth == Approx(0.0).margin(0.01));
}

TEST_CASE("too few samples give nothing") {
  const Samples made = swinging(0.5, 0.0, 0.01, 4.0, 0.0, 0.0);
  CHECK_FALSE(oscillation_of(made.t, made.x, 0.5, 5));          // shorter than ten periods
  CHECK_FALSE(oscillation_of({0.0, 0.1}, {0.0, 1.0}, 0.5, 1));  // no swing at all
  const Samples coarse = swinging(0.25, 0.0, 0.1, 20.0, 0.0, 0.0);
  CHECK_FALSE(oscillation_of(coarse.t, coarse.x, 0.25, 5));  // 2.5 samples a period
}

TEST_CASE("rises are interpolated, and hysteresis passes over chatter") {
  const std::vector<double> t{0, 1, 2, 3, 4, 5, 6, 7}, x{-3, 1, -0.5, 0.5, -3, 1, 3, 1};
  const auto all = rises(t, x, 0.0);
  REQUIRE(all.size() == 3);
  CHECK(all[0] == Approx(0.75));
  CHECK(all[2] == Approx(4.75));
  CHECK(rises(t, x, 1.0).size() == 2);
  CHECK(*mean_period(rises(t, x, 1.0)) == Approx(4.0));
  CHECK_FALSE(mean_period({1.0}));
}
