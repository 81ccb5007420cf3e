#include <cmath>
#include <string>

#include "engine/course/centreline.h"
#include "engine/numeric/functions.h"
#include "tests/catch.h"
#include "tests/engine/course/courses.h"

namespace lw {
namespace {

using namespace test;

constexpr double window = 0.25;

Course through(std::vector<Point> points, bool closed, std::vector<int> corners = {}) {
  Course course;
  course.points_mm = points;
  course.closed = closed;
  course.corners = corners;
  return course;
}
std::vector<Point> on_ellipse(double a_mm, double b_mm, int count) {
  std::vector<Point> points;
  for (int i = 0; i < count; ++i)
    points.push_back({a_mm * std::cos(2.0 * pi * i / count), b_mm * std::sin(2.0 * pi * i / count)});
  return points;
}
std::string error_of(const Course& course) {
  const Result<Centreline> line = make_centreline(course, window);
  return line ? "none" : text_of(line.error());
}

TEST_CASE("A line through points of an ellipse has the ellipse's length and curvature") {
  // Length 4 a E(m), m = 1 - (b/a)^2: SciPy 1.10, 4 * 0.5 * scipy.special.ellipe(0.64).
  constexpr double length = 2.552699886339813;
  double error_before = 0.0;
  for (const int count : {24, 48, 96}) {
    const Result<Centreline> line = make_centreline(through(on_ellipse(500, 300, count), true), window);
    REQUIRE(line.ok());
    const double error = std::fabs(line->length - length);
    if (error_before > 0.0) CHECK(error < error_before / 12.0);  // fourth order in the distance of points
    error_before = error;
  }
  CHECK(error_before < 1e-7);
  const Result<Centreline> line = make_centreline(through(on_ellipse(500, 300, 96), true), window);
  CHECK(point_at(*line, 0.0).curvature == Approx(0.5 / (0.3 * 0.3)).epsilon(0.005));  // a / b^2
  CHECK(point_at(*line, 0.25 * line->length).curvature == Approx(0.3 / 0.25).epsilon(0.005));
}

TEST_CASE("The drawn line is even: samples a pitch apart, curvature the turn of the tangent") {
  std::vector<Point> points;
  for (int i = 0; i < 30; ++i) points.push_back({i * 40.0, 90.0 * std::sin(0.45 * i)});
  const Result<Centreline> line = make_centreline(through(points, false), window);
  REQUIRE(line.ok());
  double turn = 0.0;
  for (std::size_t i = 0; i + 1 < line->nodes.size(); ++i) {
    const Node& a = line->nodes[i];
    const Node& b = line->nodes[i + 1];
    const double kh = a.curvature * line->pitch, chord = std::hypot(b.x - a.x, b.y - a.y);
    CHECK(chord == Approx(line->pitch * (1.0 - kh * kh / 24.0)).margin(1e-9));
    CHECK(a.tangent_x * b.tangent_y - a.tangent_y * b.tangent_x == Approx(std::sin(kh)).margin(1e-12));
    turn += kh;
  }
  const Node& first = line->nodes.front();
  const Node& last = line->nodes.back();
  CHECK(std::atan2(last.tangent_y, last.tangent_x) - std::atan2(first.tangent_y, first.tangent_x) ==
        Approx(turn).margin(1e-9));
  for (const Point& p : points)
    CHECK(std::fabs(nearest_foot(*line, p.x_mm * 1e-3, p.y_mm * 1e-3).deviation) < 1e-8);
}

TEST_CASE("Two points are joined by a straight, corners by straights and sharp turns") {
  const Result<Centreline> two = make_centreline(through({{0, 0}, {300, 400}}, false), window);
  REQUIRE(two.ok());
  CHECK(two->length == Approx(0.5).epsilon(1e-12));
  for (const Node& node : two->nodes) CHECK(node.curvature == 0.0);

  const Result<Centreline> square =
      make_centreline(through({{0, 0}, {500, 0}, {500, 500}, {0, 500}}, true, {0, 1, 2, 3}), window);
  REQUIRE(square.ok());
  CHECK(square->length == Approx(2.0).epsilon(1e-12));
  REQUIRE(square->corners.size() == 4);
  CHECK(square->corners[2] == Approx(1.0));
  REQUIRE(square->sections.size() == 8);
  CHECK(square->sections[2].turn == Approx(pi / 2));
}

TEST_CASE("One corner of a closed line leaves the rest smooth") {
  const Result<Centreline> drop =
      make_centreline(through({{0, 0}, {200, -120}, {320, 0}, {200, 120}}, true, {0}), window);
  REQUIRE(drop.ok());
  REQUIRE(drop->corners.size() == 1);
  for (std::size_t i = 0; i + 1 < drop->nodes.size(); ++i) {
    const Node& a = drop->nodes[i];
    const Node& b = drop->nodes[i + 1];
    CHECK(a.tangent_x * b.tangent_x + a.tangent_y * b.tangent_y > 0.999);
  }
}

TEST_CASE("A stroke that crosses itself or comes back over a point is a course like any other") {
  CHECK(error_of(through(
            {{0, 0}, {300, 200}, {600, 0}, {300, -200}, {0, 10}, {-300, 200}, {-600, 0}, {-300, -200}},
            true)) == "none");
  CHECK(error_of(through({{0, 0}, {400, 0}, {400, 400}, {200, 400}, {200, -300}}, false)) == "none");
}

TEST_CASE("A drawn oval is told as two straights and two bends") {
  std::vector<Point> points;
  for (int i = 0; i <= 8; ++i) points.push_back({i * 100.0, 0.0});
  for (int i = 1; i < 8; ++i)
    points.push_back({800 + 300 * std::sin(i * pi / 8), 300 - 300 * std::cos(i * pi / 8)});
  for (int i = 0; i <= 8; ++i) points.push_back({800 - i * 100.0, 600.0});
  for (int i = 1; i < 8; ++i)
    points.push_back({-300 * std::sin(i * pi / 8), 300 + 300 * std::cos(i * pi / 8)});
  const Result<Centreline> line = make_centreline(through(points, true), window);
  REQUIRE(line.ok());
  std::vector<double> radii;
  for (const CourseSection& section : line->sections)
    if (!std::isinf(section.radius)) radii.push_back(section.radius);
  REQUIRE(radii.size() == 2);
  CHECK(radii[0] == Approx(0.3).epsilon(0.05));
  CHECK(radii[1] == Approx(0.3).epsilon(0.05));
}

TEST_CASE("Bad points are errors that name the point") {
  CHECK(error_of(through({{0, 0}}, false)) == "course.points_mm: 1 point: an open course needs at least 2");
  CHECK(error_of(through({{0, 0}, {9, 9}}, true)) ==
        "course.points_mm: 2 points: a closed course needs at least 3");
  CHECK(error_of(through({{5, 5}, {5, 5}, {5, 5}}, true)) ==
        "course.points_mm[1]: [5, 5]: is less than 0.1 mm from the point before it");
  CHECK(error_of(through({{0, 0}, {90, 0}, {90, 90}, {0, 0}}, true)) ==
        "course.points_mm[3]: [0, 0]: repeats the first point; a closed course leads back to it by itself");
  CHECK(holds(error_of(through({{0, 0}, {NAN, 0}}, false)), "course.points_mm[1]"));
  CHECK(error_of(through({{0, 0}, {90, 0}, {90, 90}}, true, {1, 3})) ==
        "course.corners[1]: 3: must be the number of a point, 0 to 2");
  CHECK(holds(error_of(through({{0, 0}, {500, 0}, {0, 0.01}}, false)),
              "would turn within a radius of less than 1 mm"));
  CHECK(holds(error_of(through({{0, 0}, {500, 0}, {0, 0.01}}, false, {1})), "doubles back on itself"));
}

}  // namespace
}  // namespace lw
