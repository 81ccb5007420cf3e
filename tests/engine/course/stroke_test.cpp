#include "engine/course/stroke.h"

#include <cmath>
#include <functional>

#include "engine/course/centreline.h"
#include "engine/numeric/functions.h"
#include "engine/numeric/random.h"
#include "tests/catch.h"

namespace lw {
namespace {

/// 400 places along a curve, slow at its ends as a hand is, each off by up to `tremor` mm.
std::vector<Point> by_hand(const std::function<Point(double)>& curve, double tremor) {
  std::vector<Point> places;
  for (int i = 0; i < 400; ++i) {
    const double t = i / 399.0;
    const Point p = curve(t * t * (3.0 - 2.0 * t));
    const auto words = draw<double>(7, 0, static_cast<std::uint64_t>(i), 0);
    places.push_back({p.x_mm + tremor * (2.0 * unit_from<double>(words.word[0]) - 1.0),
                      p.y_mm + tremor * (2.0 * unit_from<double>(words.word[1]) - 1.0)});
  }
  return places;
}

/// The course through the stroke's points, and how far the places lie from it at most, mm.
double furthest(const Stroke& stroke, const std::vector<Point>& places) {
  Course course;
  course.points_mm = stroke.points_mm;
  course.corners = stroke.corners;
  course.closed = stroke.closed;
  const Result<Centreline> line = make_centreline(course, 0.25);
  REQUIRE(line.ok());
  double most = 0.0;
  for (const Point& p : places)
    most = std::max(most, 1e3 * std::fabs(nearest_foot(*line, 1e-3 * p.x_mm, 1e-3 * p.y_mm).deviation));
  return most;
}

TEST_CASE("A shaky straight stroke becomes two points") {
  const std::vector<Point> places = by_hand([](double t) { return Point{900 * t, 250 * t}; }, 1.5);
  const Result<Stroke> stroke = simplify_stroke(places, {});
  REQUIRE(stroke.ok());
  CHECK_FALSE(stroke->closed);
  CHECK(stroke->points_mm.size() == 2);
  CHECK(stroke->corners.empty());
}

TEST_CASE("A circle closes, whether drawn short or over, and keeps its radius") {
  for (const double lap : {0.985, 1.0, 1.04}) {
    const std::vector<Point> places = by_hand(
        [lap](double t) {
          return Point{300 * std::cos(2 * pi * lap * t), 300 * std::sin(2 * pi * lap * t)};
        },
        1.5);
    const Result<Stroke> stroke = simplify_stroke(places, {});
    REQUIRE(stroke.ok());
    CHECK(stroke->closed);
    CHECK(stroke->corners.empty());
    CHECK(stroke->points_mm.size() < 40);
    Course course;
    course.points_mm = stroke->points_mm;
    const Result<Centreline> line = make_centreline(course, 0.25);
    REQUIRE(line.ok());
    CHECK(line->length == Approx(0.6 * pi).epsilon(0.01));
    CHECK(furthest(*stroke, places) < 5.0);
  }
}

TEST_CASE("A square has four corners and does not start on one") {
  const std::vector<Point> places = by_hand(
      [](double t) {
        const double u = 4 * t + 0.5;
        const int side = static_cast<int>(u) % 4;
        const double along = 600 * (u - static_cast<int>(u));
        const Point at[4] = {{along, 0}, {600, along}, {600 - along, 600}, {0, 600 - along}};
        return at[side];
      },
      1.0);
  const Result<Stroke> stroke = simplify_stroke(places, {});
  REQUIRE(stroke.ok());
  CHECK(stroke->closed);
  CHECK(stroke->corners.size() == 4);
  CHECK(stroke->corners.front() > 0);
  CHECK(furthest(*stroke, places) < 6.0);
}

TEST_CASE("A wavy line stays open, without corners, within the tolerance and the tremor") {
  const std::vector<Point> places = by_hand(
      [](double t) {
        return Point{2000 * t, 60 * std::sin(12 * pi * t)};
      },
      1.0);
  for (const double tolerance : {2.0, 3.0, 6.0}) {
    const Result<Stroke> stroke = simplify_stroke(places, {.tolerance_mm = tolerance});
    REQUIRE(stroke.ok());
    CHECK_FALSE(stroke->closed);
    CHECK(stroke->corners.empty());
    CHECK(furthest(*stroke, places) < tolerance + 2.5);
  }
}

TEST_CASE("Strokes of nothing are errors") {
  const auto error_of = [](const std::vector<Point>& places) {
    const Result<Stroke> stroke = simplify_stroke(places, {});
    return stroke ? std::string("none") : text_of(stroke.error());
  };
  CHECK(error_of({}) == "stroke: 0 places: a line needs at least 2");
  CHECK(error_of({{5, 5}, {5, 5}, {5, 5}}) == "stroke: 0 mm long: a line must be at least 50 mm long");
  CHECK(error_of({{0, 0}, {30, 0}}) == "stroke: 30 mm long: a line must be at least 50 mm long");
  CHECK(error_of({{0, 0}, {INFINITY, 0}}) == "stroke[1]: inf, 0: must be finite numbers");
}

}  // namespace
}  // namespace lw
