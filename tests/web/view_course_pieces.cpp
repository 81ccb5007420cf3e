// Editing a course of exact pieces, checked against the engine's own centreline and closed forms.
#include <cmath>
#include <numbers>

#include "engine/course/centreline.h"
#include "tests/catch.h"
#include "web/view/course_gaps.h"
#include "web/view/course_pieces.h"
#include "web/view/course_whole.h"
#include "web/view/dubins.h"

using namespace lw;
using namespace lw::view;

namespace {

Scenario oval() {
  Scenario s;
  s.course.start_mm = {100, -50};
  s.course.heading_deg = 30;
  s.course.pieces = {straight_of(800), bend_of(350, 180), straight_of(800), bend_of(350, 180)};
  return s;
}

double length_mm(const Course& course) {
  const Result<Centreline> line = make_centreline(course, 0.1);
  REQUIRE(line.ok());
  return 1e3 * line->length;
}

Centreline line_of(const Course& course) {
  Result<Centreline> line = make_centreline(course, 0.1);
  if (!line) FAIL(text_of(line.error()));
  return *line;
}

/// Largest distance of points of one line from the other, mm.
double farthest(const Centreline& a, const Centreline& b) {
  double most = 0;
  for (double s = 0; s < a.length; s += 0.01) {
    const CoursePoint p = point_at(a, s);
    most = std::max(most, 1e3 * std::fabs(nearest_foot(b, p.x, p.y).deviation));
  }
  return most;
}

}  // namespace

TEST_CASE("joints lie where the engine's centreline passes") {
  const Scenario s = oval();
  const Centreline line = line_of(s.course);
  for (const Joint& joint : joints_of(s.course)) {
    const CoursePoint p = point_at(line, 1e-3 * joint.s_mm);
    CHECK(1e3 * p.x == Approx(joint.at.x_mm).margin(1e-3));
    CHECK(1e3 * p.y == Approx(joint.at.y_mm).margin(1e-3));
    // A joint inside a sample: within pitch times curvature (engine/course/centreline.h).
    CHECK(p.tangent_x == Approx(std::cos(joint.heading_deg * std::numbers::pi / 180)).margin(3e-3));
  }
}

TEST_CASE("adding and removing a piece opens a closed course, and every index is checked") {
  const Scenario s = oval();
  const Result<Scenario> more = with_piece_inserted(s, 4, bend_of(0, 90));
  REQUIRE(more.ok());
  CHECK_FALSE(more->course.closed);
  CHECK(more->course.pieces.size() == 5);
  const Result<Scenario> fewer = with_piece_removed(s, 3);
  REQUIRE(fewer.ok());
  CHECK_FALSE(fewer->course.closed);
  CHECK(length_mm(fewer->course) == Approx(1600 + 350 * std::numbers::pi));
  CHECK_FALSE(with_piece_inserted(s, 5, straight_of(10)).ok());
  CHECK_FALSE(with_piece_removed(s, 4).ok());
  CHECK_FALSE(with_piece_changed(s, 4, straight_of(10)).ok());
  CHECK_FALSE(with_piece_moved(s, 0, 4).ok());
  CHECK_FALSE(with_piece_changed(s, 0, straight_of(-10)).ok());
  CHECK_FALSE(with_piece_changed(s, 0, Piece{}).ok());
  Scenario drawn;
  drawn.course.points_mm = {{0, 0}, {100, 0}};
  CHECK_FALSE(with_piece_inserted(drawn, 0, straight_of(10)).ok());
}

TEST_CASE("a closed oval stays closed when one straight or one radius changes: its partner follows") {
  const Result<Scenario> longer = with_piece_changed(oval(), 0, straight_of(1234.5));
  REQUIRE(longer.ok());
  CHECK(longer->course.closed);
  CHECK(*longer->course.pieces[2].straight_mm == Approx(1234.5));
  CHECK(*longer->course.pieces[1].radius_mm == Approx(350));
  line_of(longer->course);
  const Result<Scenario> wider = with_piece_changed(oval(), 1, bend_of(500, 180));
  REQUIRE(wider.ok());
  CHECK(wider->course.closed);
  CHECK(*wider->course.pieces[3].radius_mm == Approx(500));
  line_of(wider->course);
  const Result<Scenario> turned = with_piece_changed(oval(), 1, bend_of(350, 120));
  REQUIRE(turned.ok());
  CHECK_FALSE(turned->course.closed);
}

TEST_CASE("moving a piece keeps the others in order") {
  Scenario s = oval();
  s.course.closed = false;
  s.course.pieces[2] = straight_of(123);
  const Result<Scenario> later = with_piece_moved(s, 0, 2);
  REQUIRE(later.ok());
  CHECK(later->course.pieces[0].radius_mm == 350);
  CHECK(later->course.pieces[1].straight_mm == 123);
  CHECK(later->course.pieces[2].straight_mm == 800);
  const Result<Scenario> back = with_piece_moved(*later, 2, 0);
  REQUIRE(back.ok());
  CHECK(back->course.pieces[0].straight_mm == 800);
  CHECK(back->course.pieces[2].straight_mm == 123);
}

TEST_CASE("the way back: bend, straight, bend, as Dubins' paths have it") {
  // Side by side, opposite headings, two radii apart: a half circle (closed form).
  const std::vector<Piece> half = shortest_way({{0, 0}, 0, 0}, {{0, 400}, 180, 0}, 200);
  REQUIRE(half.size() == 1);
  CHECK(*half[0].turn_deg == Approx(180));
  // Straight ahead: one straight.
  const std::vector<Piece> ahead = shortest_way({{0, 0}, 90, 0}, {{0, 700}, 90, 0}, 200);
  REQUIRE(ahead.size() == 1);
  CHECK(*ahead[0].straight_mm == Approx(700));
  // Left, straight, right: two quarter turns with a straight of 100 between shift by (500, 300 + ... ).
  const std::vector<Piece> shift = shortest_way({{0, 0}, 0, 0}, {{400, 500}, 0, 0}, 200);
  double total = 0;
  for (const Piece& piece : shift) total += length_of_piece(piece);
  CHECK(total == Approx(200 * std::numbers::pi + 100));
}

TEST_CASE("closing leads any open course back to its start") {
  int closed = 0;
  for (const double turn : {-170.0, -90.0, -20.0, 35.0, 90.0, 200.0}) {
    for (const double straight : {150.0, 700.0, 2000.0}) {
      Scenario s;
      s.course.closed = false;
      s.course.heading_deg = 77;
      s.course.pieces = {straight_of(1000), bend_of(300, turn), straight_of(straight)};
      const Result<Scenario> shut = with_closed(s, true, 150);
      REQUIRE(shut.ok());
      CHECK(shut->course.closed);
      line_of(shut->course);
      ++closed;
    }
  }
  CHECK(closed == 18);
  const Scenario done = oval();
  CHECK(with_closed(done, true, 150)->course.pieces.size() == 4);
}

TEST_CASE("the start moved along a closed course of pieces changes nothing of the line") {
  const Scenario s = oval();
  const Centreline line = line_of(s.course);
  for (const double at : {0.0, 3.0, 400.0, 798.0, 1300.0, 3000.0, 3790.0, -200.0}) {
    const Result<Scenario> moved = with_start_at(s, line, at, 5);
    REQUIRE(moved.ok());
    const Centreline now = line_of(moved->course);
    CHECK(now.length == Approx(line.length).epsilon(1e-6));
    CHECK(farthest(line, now) < 0.2);
    const CoursePoint wanted = point_at(line, 1e-3 * at), got = point_at(now, 0);
    CHECK(1e3 * std::hypot(wanted.x - got.x, wanted.y - got.y) < 5.1);
    CHECK(wanted.tangent_x * got.tangent_x + wanted.tangent_y * got.tangent_y > 0.999);
  }
  // Twice moved, the halves of the first move are one piece again.
  const Result<Scenario> once = with_start_at(s, line, 400, 5);
  const Result<Scenario> twice = with_start_at(*once, line_of(once->course), 400, 5);
  CHECK(twice->course.pieces.size() == 4);
}

TEST_CASE("the start moved along an open course cuts off what lies before") {
  Scenario s = oval();
  s.course.closed = false;
  s.course.gaps_mm = {{100, 200}, {1000, 1100}};
  const Centreline line = line_of(s.course);
  const Result<Scenario> moved = with_start_at(s, line, 500, 5);
  REQUIRE(moved.ok());
  CHECK(length_mm(moved->course) == Approx(1e3 * line.length - 500));
  REQUIRE(moved->course.gaps_mm.size() == 1);
  CHECK(moved->course.gaps_mm[0].from_mm == Approx(500));
  CHECK_FALSE(with_start_at(s, line, 1e3 * line.length - 3, 5).ok());
}

TEST_CASE("a reversed course is the same line the other way, and twice reversed the same course") {
  for (const bool closed : {true, false}) {
    Scenario s = oval();
    s.course.closed = closed;
    s.course.pieces[1] = bend_of(350, closed ? 180 : 130);
    s.course.gaps_mm = {{100, 180}, {1200, 1300}};
    const Centreline line = line_of(s.course);
    const Scenario other = with_direction_reversed(s, line);
    const Centreline now = line_of(other.course);
    CHECK(farthest(line, now) < 0.05);
    const CoursePoint a = point_at(line, 0.14), b = point_at(now, now.length - 0.14);
    CHECK(std::hypot(a.x - b.x, a.y - b.y) < 1e-4);
    CHECK(a.tangent_x == Approx(-b.tangent_x).margin(1e-3));
    const Scenario again = with_direction_reversed(other, now);
    CHECK(again.course.gaps_mm[0].from_mm == Approx(100).margin(0.11));
    CHECK(again.course.gaps_mm[1].to_mm == Approx(1300).margin(0.11));
    CHECK(*again.course.pieces[1].turn_deg == *s.course.pieces[1].turn_deg);
  }
}

TEST_CASE("a handle of a straight or bend goes with the hand") {
  const Course course = oval().course;
  const Joint from = joints_of(course)[0];
  const double heading = 30 * std::numbers::pi / 180;
  const Point ahead{from.at.x_mm + 555 * std::cos(heading) - 90 * std::sin(heading),
                    from.at.y_mm + 555 * std::sin(heading) + 90 * std::cos(heading)};
  CHECK(straight_towards(course, 0, ahead, 10) == Approx(555));
  CHECK(straight_towards(course, 0, {-5000, -5000}, 10) == 10);
  const Point middle = middle_of_bend(course, 1);
  const Joint joint = joints_of(course)[1];
  const Point quarter{middle.x_mm - (joint.at.y_mm - middle.y_mm),
                      middle.y_mm + (joint.at.x_mm - middle.x_mm)};
  CHECK(turn_towards(course, 1, quarter) == Approx(90));
  CHECK(turn_towards(course, 1, joint.at) == Approx(5));
}
