// The minimiser on published test functions.
#include "engine/tuning/search_minimise.h"

#include <cmath>

#include "engine/numeric/functions.h"
#include "tests/catch.h"

using namespace lw;

namespace {

using Function = double (*)(const std::vector<double>&);

double sphere(const std::vector<double>& x) {
  double sum = 0.0;
  for (const double value : x) sum += value * value;
  return sum;
}

/// Rosenbrock 1960, "An automatic method for finding the greatest or least value of a function", in the
/// chained form.
double rosenbrock(const std::vector<double>& x) {
  double sum = 0.0;
  for (std::size_t i = 0; i + 1 < x.size(); ++i)
    sum += 100.0 * std::pow(x[i + 1] - x[i] * x[i], 2) + std::pow(1.0 - x[i], 2);
  return sum;
}

/// Rastrigin 1974; in n numbers Muehlenbein, Schomisch and Born 1991.
double rastrigin(const std::vector<double>& x) {
  double sum = 10.0 * static_cast<double>(x.size());
  for (const double value : x) sum += value * value - 10.0 * std::cos(2.0 * pi * value);
  return sum;
}

/// The ellipsoid of Hansen's tutorial: axes a thousand times as long as others.
double ellipsoid(const std::vector<double>& x) {
  double sum = 0.0;
  for (std::size_t i = 0; i < x.size(); ++i)
    sum += std::pow(1e6, static_cast<double>(i) / static_cast<double>(x.size() - 1)) * x[i] * x[i];
  return sum;
}

/// Over [-5, 5] in every number, off the middle so that the box does not give the place away.
std::vector<double> unboxed(const std::vector<double>& point) {
  std::vector<double> x;
  for (const double value : point) x.push_back(10.0 * value - 5.0);
  return x;
}

Minimised lowest(Function f, std::size_t n, int evaluations, std::uint64_t seed) {
  return minimise({std::vector<double>(n, 0.83)},
                  [&](const std::vector<double>& point) {
                    return Worth{0.0, f(unboxed(point))};
                  },
                  {.evaluations = evaluations, .seed = seed});
}

}  // namespace

TEST_CASE("the published test functions are brought to their lowest values") {
  for (const std::uint64_t seed : {1u, 2u, 3u}) {
    CAPTURE(seed);
    CHECK(lowest(sphere, 5, 2500, seed).worth.value < 1e-9);
    CHECK(lowest(ellipsoid, 5, 6000, seed).worth.value < 1e-8);
    const Minimised banana = lowest(rosenbrock, 4, 12000, seed);
    CHECK(banana.worth.value < 1e-9);
    for (const double value : unboxed(banana.point)) CHECK(value == Approx(1.0).margin(1e-4));
    const Minimised egg_box =
        lowest(rastrigin, 3, 20000, seed);  // a thousand dips; restarts find the deepest
    CHECK(egg_box.worth.value < 1e-8);
    CHECK(egg_box.runs > 1);
  }
}

TEST_CASE("limits come first: problem g06, whose feasible part is a sliver") {
  // Floudas and Pardalos 1987; Michalewicz and Schoenauer 1996: lowest -6961.81388 at (14.095, 0.84296).
  const auto place = [](const std::vector<double>& point) {
    return std::vector<double>{13.0 + 87.0 * point[0], 100.0 * point[1]};
  };
  const auto worth = [&](const std::vector<double>& point) {
    const std::vector<double> x = place(point);
    const double near = 100.0 - std::pow(x[0] - 5.0, 2) - std::pow(x[1] - 5.0, 2);
    const double far = std::pow(x[0] - 6.0, 2) + std::pow(x[1] - 5.0, 2) - 82.81;
    return Worth{std::max(0.0, near) + std::max(0.0, far),
                 std::pow(x[0] - 10.0, 3) + std::pow(x[1] - 20.0, 3)};
  };
  const Minimised found = minimise({{0.5, 0.5}}, worth, {.evaluations = 20000});
  CHECK(found.worth.breach == 0.0);
  CHECK(found.worth.value == Approx(-6961.81388).epsilon(1e-4));
  CHECK(place(found.point)[0] == Approx(14.095).epsilon(1e-3));
}

TEST_CASE("a lowest place on the border of the box is reached, and no try lies beyond it") {
  bool inside = true;
  const auto worth = [&](const std::vector<double>& point) {
    for (const double value : point) inside = inside && value >= 0.0 && value <= 1.0;
    return Worth{0.0, point[0] + 2.0 * (1.0 - point[1]) + std::pow(point[2] - 0.3, 2)};
  };
  const Minimised found = minimise({{0.5, 0.5, 0.5}}, worth, {.evaluations = 3000});
  CHECK(inside);
  CHECK(found.point[0] == Approx(0.0).margin(1e-6));
  CHECK(found.point[1] == Approx(1.0).margin(1e-6));
  CHECK(found.point[2] == Approx(0.3).margin(1e-3));
}

TEST_CASE("a search repeats by its seed, keeps to its tries and stops when told") {
  const Minimised one = lowest(rosenbrock, 3, 500, 7), same = lowest(rosenbrock, 3, 500, 7);
  CHECK(one.point == same.point);
  CHECK(one.evaluations == 500);
  CHECK(lowest(rosenbrock, 3, 500, 8).point != one.point);

  int tries = 0;
  const Minimised stopped = minimise(
      {{0.2}, {0.9}},
      [&](const std::vector<double>& point) {
        ++tries;
        return Worth{0.0, std::fabs(point[0] - 0.8)};
      },
      {}, [](const Minimised& so_far) { return so_far.evaluations < 2; });
  CHECK(stopped.stopped);
  CHECK(tries == 2);
  CHECK(stopped.point == std::vector<double>{0.9});  // the better start
}

TEST_CASE("less breach beats any value, and of equals the lower value wins") {
  CHECK(better({0.0, 5.0}, {0.1, 1.0}));
  CHECK(better({0.1, 9.0}, {0.2, 1.0}));
  CHECK(better({0.0, 1.0}, {0.0, 2.0}));
  CHECK_FALSE(better({0.0, 1.0}, {0.0, 1.0}));
}
