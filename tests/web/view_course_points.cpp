// Editing a drawn course: corners follow their points, gaps their part of the line.
#include <cmath>

#include "engine/course/centreline.h"
#include "tests/catch.h"
#include "web/view/course_gaps.h"
#include "web/view/course_pieces.h"
#include "web/view/course_points.h"
#include "web/view/course_whole.h"
#include "web/view/tidy.h"

using namespace lw;
using namespace lw::view;

namespace {

Scenario drawn(bool closed = true) {
  Scenario s;
  s.course.closed = closed;
  s.course.points_mm = {{0, 0}, {600, -40}, {1200, 0}, {1400, 400}, {1000, 800}, {300, 800}, {-200, 400}};
  s.course.corners = {2, 4};
  return s;
}

Centreline line_of(const Course& course) {
  Result<Centreline> line = make_centreline(course, 0.1);
  if (!line) FAIL(text_of(line.error()));
  return *line;
}

/// The middle of a gap on the floor, m.
CoursePoint middle_of(const Course& course, std::size_t gap) {
  const Stretch& s = course.gaps_mm[gap];
  return point_at(line_of(course), 0.5e-3 * (s.from_mm + s.to_mm));
}

double farthest(const Centreline& a, const Centreline& b) {
  double most = 0;
  for (double s = 0; s < a.length; s += 0.005) {
    const CoursePoint p = point_at(a, s);
    most = std::max(most, 1e3 * std::fabs(nearest_foot(b, p.x, p.y).deviation));
  }
  return most;
}

}  // namespace

TEST_CASE("corners keep to their points when others come and go") {
  const Scenario s = drawn();
  CHECK(with_point_inserted(s, 3, {1300, 200})->course.corners == std::vector<int>{2, 5});
  CHECK(with_point_inserted(s, 0, {-100, 200})->course.corners == std::vector<int>{3, 5});
  CHECK(with_point_deleted(s, 3)->course.corners == std::vector<int>{2, 3});
  CHECK(with_point_deleted(s, 2)->course.corners == std::vector<int>{3});
  CHECK(with_corner(s, 0, true)->course.corners == std::vector<int>{0, 2, 4});
  CHECK(with_corner(s, 2, false)->course.corners == std::vector<int>{4});
  CHECK(with_corner(s, 2, true)->course.corners == std::vector<int>{2, 4});
  CHECK(with_closed(with_corner(s, 0, true).operator*(), false, 100)->course.corners ==
        std::vector<int>{2, 4});
}

TEST_CASE("indices, ends and kinds of courses are checked") {
  const Scenario s = drawn(), open = drawn(false);
  CHECK_FALSE(with_point_moved(s, 7, {0, 0}).ok());
  CHECK_FALSE(with_point_inserted(s, 8, {0, 0}).ok());
  CHECK_FALSE(with_point_deleted(s, 7).ok());
  CHECK_FALSE(with_corner(s, 7, true).ok());
  CHECK_FALSE(with_corner(open, 0, true).ok());
  CHECK_FALSE(with_corner(open, 6, true).ok());
  Scenario three;
  three.course.points_mm = {{0, 0}, {300, 0}, {0, 300}};
  CHECK_FALSE(with_point_deleted(three, 0).ok());
  three.course.closed = false;
  CHECK(with_point_deleted(three, 0).ok());
  three.course.points_mm.pop_back();
  CHECK_FALSE(with_point_deleted(three, 0).ok());
  CHECK_FALSE(with_closed(three, true, 100).ok());
  Scenario laid;
  laid.course.pieces = {straight_of(500)};
  CHECK_FALSE(with_point_moved(laid, 0, {0, 0}).ok());
  CHECK_FALSE(with_stroke_appended(laid, {}, 1).ok());
  CHECK_FALSE(with_points_from_pieces(s, line_of(s.course)).ok());
}

TEST_CASE("drawn points are marks of the line at the arc lengths where the line passes them") {
  const Course course = drawn().course;
  const Centreline line = line_of(course);
  const std::vector<double> marks = marks_of(course, line);
  REQUIRE(marks.size() == course.points_mm.size());
  for (std::size_t i = 0; i < marks.size(); ++i) {
    const CoursePoint p = point_at(line, 1e-3 * marks[i]);
    CHECK(1e3 * p.x == Approx(course.points_mm[i].x_mm).margin(0.6));
    CHECK(1e3 * p.y == Approx(course.points_mm[i].y_mm).margin(0.6));
    if (i > 0) CHECK(marks[i] > marks[i - 1]);
  }
}

TEST_CASE("a gap stays where it lies on the floor when points elsewhere move, come, or go") {
  Scenario s = drawn();
  s.course.gaps_mm = {{2300, 2380}};
  const CoursePoint before = middle_of(s.course, 0);
  const auto stays = [&](const Result<Scenario>& after) {
    REQUIRE(after.ok());
    REQUIRE(after->course.gaps_mm.size() == 1);
    const CoursePoint now = middle_of(after->course, 0);
    return 1e3 * std::hypot(now.x - before.x, now.y - before.y);
  };
  CHECK(stays(with_point_moved(s, 1, {600, -300})) < 15);
  CHECK(stays(with_point_inserted(s, 1, {300, 60})) < 15);
  CHECK(stays(with_point_deleted(s, 1)) < 15);
  CHECK(stays(with_start_at(s, line_of(s.course), 900, 5)) < 15);
  CHECK(stays(Result<Scenario>(with_direction_reversed(s, line_of(s.course)))) < 2);
}

TEST_CASE("the start moved along a drawn course leaves the line where it is") {
  const Scenario s = drawn();
  const Centreline line = line_of(s.course);
  for (const double at : {0.0, 250.0, 1201.0, 3000.0, 1e3 * line.length - 100}) {
    const Result<Scenario> moved = with_start_at(s, line, at, 5);
    REQUIRE(moved.ok());
    const Centreline now = line_of(moved->course);
    const CoursePoint wanted = point_at(line, 1e-3 * at), got = point_at(now, 0);
    CHECK(1e3 * std::hypot(wanted.x - got.x, wanted.y - got.y) < 5.1);
    // A point more bends the curve between its neighbours a little.
    CHECK(farthest(line, now) < 6);
  }
  CHECK(with_start_at(s, line, 0, 5)->course.points_mm.size() == 7);
  const Scenario open = drawn(false);
  const Result<Scenario> cut = with_start_at(open, line_of(open.course), 900, 5);
  REQUIRE(cut.ok());
  CHECK(cut->course.points_mm.size() == 6);
  CHECK(cut->course.corners == std::vector<int>{1, 3});
}

TEST_CASE("a drawn course reversed twice is itself, closed or open") {
  for (const bool closed : {true, false}) {
    const Scenario s = drawn(closed);
    const Centreline line = line_of(s.course);
    const Scenario other = with_direction_reversed(s, line);
    CHECK(farthest(line, line_of(other.course)) < 0.3);
    const Scenario again = with_direction_reversed(other, line_of(other.course));
    CHECK(again.course.corners == s.course.corners);
    for (std::size_t i = 0; i < s.course.points_mm.size(); ++i)
      CHECK(again.course.points_mm[i].x_mm == s.course.points_mm[i].x_mm);
    if (closed) CHECK(other.course.points_mm[0].x_mm == 0);
  }
}

TEST_CASE("pieces turned into points stay within a millimetre of where they lay") {
  std::vector<Course> courses(3);
  courses[0].pieces = {straight_of(800), bend_of(350, 180), straight_of(800), bend_of(350, 180)};
  courses[1].closed = false;
  courses[1].pieces = {straight_of(500), bend_of(150, 90), bend_of(150, -180),
                       straight_of(300), bend_of(0, 90),   straight_of(400)};
  courses[2].pieces = {straight_of(600), bend_of(0, 90), straight_of(600), bend_of(0, 90),
                       straight_of(600), bend_of(0, 90), straight_of(600), bend_of(0, 90)};
  for (const Course& course : courses) {
    Scenario s;
    s.course = course;
    s.course.gaps_mm = {{250, 300}};
    const Centreline line = line_of(s.course);
    const Result<Scenario> points = with_points_from_pieces(s, line);
    REQUIRE(points.ok());
    CHECK(points->course.pieces.empty());
    const Centreline now = line_of(points->course);
    CHECK(farthest(line, now) < 1.0);
    CHECK(now.corners.size() == line.corners.size());
    CHECK(points->course.gaps_mm.size() == 1);
  }
}

TEST_CASE("strokes: a loop, a line, its continuation, and what is no stroke") {
  std::vector<Point> loop, arc;
  for (int i = 0; i <= 200; ++i) {
    const double angle = 2 * 3.14159265358979 * i / 200;
    loop.push_back({400 * std::cos(angle), 300 * std::sin(angle)});
    arc.push_back({1000 + 3.0 * i, 50 * std::sin(angle)});
  }
  Scenario s = drawn();
  s.course.gaps_mm = {{10, 50}};
  s.course.line_mm = 33;
  const Result<Scenario> ring = with_stroke(s, loop, 2);
  REQUIRE(ring.ok());
  CHECK(ring->course.closed);
  CHECK(ring->course.line_mm == 33);
  CHECK(ring->course.gaps_mm.empty());
  CHECK(ring->course.points_mm.size() < 30);
  line_of(ring->course);
  Scenario open;
  open.course.closed = false;
  open.course.points_mm = {{0, 0}, {500, 0}, {1000, 0}};
  const Result<Scenario> longer = with_stroke_appended(open, arc, 2);
  REQUIRE(longer.ok());
  CHECK(longer->course.points_mm.back().x_mm == Approx(1600).margin(3));
  CHECK(longer->course.points_mm[2].x_mm == 1000);
  line_of(longer->course);
  CHECK_FALSE(with_stroke_appended(s, arc, 2).ok());
  CHECK_FALSE(with_stroke(s, {}, 2).ok());
  CHECK_FALSE(with_stroke(s, std::vector<Point>{{0, 0}, {1, 0}}, 2).ok());
  CHECK_FALSE(with_stroke(s, std::vector<Point>{{0, 0}, {NAN, 0}, {500, 0}}, 2).ok());
}

TEST_CASE("width and place of the line are held to what a scenario may say") {
  const Scenario s = drawn();
  CHECK(with_line_width(s, 0.0).course.line_mm == 1);
  CHECK(with_line_width(s, 1e9).course.line_mm == 1000);
  CHECK(with_line_width(s, 18.4).course.line_mm == 18.5);
  CHECK(with_course_shifted(s, 10.04, -5).course.points_mm[1].x_mm == 610);
  CHECK(with_course_shifted(s, 10.04, -5).course.points_mm[1].y_mm == -45);
  CHECK(tidy(0.1 * 3, 0.1) == 0.3);
  CHECK_FALSE(std::signbit(tidy(-0.01, 0.1)));
}
