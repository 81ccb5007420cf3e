// Gaps: made, joined, moved, and carried along when the line changes.
#include "tests/catch.h"
#include "web/view/course_gaps.h"
#include "web/view/course_pieces.h"

using namespace lw;
using namespace lw::view;

namespace {
Scenario straight(double length, bool closed = false) {
  Scenario s;
  s.course.closed = closed;
  s.course.pieces = {straight_of(length)};
  return s;
}
}  // namespace

TEST_CASE("a gap is put in order, held to the line and joined to those it touches") {
  Result<Scenario> s = with_gap(straight(1000), 300, 250, 1000);
  REQUIRE(s.ok());
  s = with_gap(*s, 900, 2000, 1000);
  REQUIRE(s.ok());
  REQUIRE(s->course.gaps_mm.size() == 2);
  CHECK(s->course.gaps_mm[0].from_mm == 250);
  CHECK(s->course.gaps_mm[1].to_mm == 1000);
  s = with_gap(*s, 290, 400, 1000);
  REQUIRE(s.ok());
  REQUIRE(s->course.gaps_mm.size() == 2);
  CHECK(s->course.gaps_mm[0].from_mm == 250);
  CHECK(s->course.gaps_mm[0].to_mm == 400);
  CHECK_FALSE(with_gap(*s, 0, 1000, 1000).ok());
  CHECK_FALSE(with_gap(*s, 500, 500.2, 1000).ok());
}

TEST_CASE("a gap through the start of a closed course is held as two") {
  const Result<Scenario> s = with_gap(straight(1000, true), 950, 40, 1000);
  REQUIRE(s.ok());
  REQUIRE(s->course.gaps_mm.size() == 2);
  CHECK(s->course.gaps_mm[0].from_mm == 0);
  CHECK(s->course.gaps_mm[0].to_mm == 40);
  CHECK(s->course.gaps_mm[1].from_mm == 950);
  CHECK(s->course.gaps_mm[1].to_mm == 1000);
}

TEST_CASE("an end of a gap stops at its other end and at its neighbours") {
  Scenario s = straight(1000);
  s.course.gaps_mm = {{100, 200}, {300, 400}};
  CHECK(with_gap_end(s, 0, true, 350, 1000)->course.gaps_mm[0].to_mm == 300);
  CHECK(with_gap_end(s, 0, true, 20, 1000)->course.gaps_mm[0].to_mm == 101);
  CHECK(with_gap_end(s, 1, false, 150, 1000)->course.gaps_mm[1].from_mm == 200);
  CHECK(with_gap_end(s, 1, true, 5000, 1000)->course.gaps_mm[1].to_mm == 1000);
  CHECK_FALSE(with_gap_end(s, 2, true, 0, 1000).ok());
  CHECK(with_gap_removed(s, 0)->course.gaps_mm.size() == 1);
  CHECK_FALSE(with_gap_removed(s, 2).ok());
  CHECK(gap_at(s.course, 350, 0) == 1);
  CHECK(gap_at(s.course, 204, 5) == 0);
  CHECK(gap_at(s.course, 250, 5) == -1);
}

TEST_CASE("gaps stay between the same marks of the line when it changes") {
  const std::vector<Stretch> gaps{{50, 150}, {250, 350}};
  const std::vector<Stretch> now = carry_gaps(gaps, {{0, 0}, {200, 400}, {400, 600}});
  REQUIRE(now.size() == 2);
  CHECK(now[0].from_mm == 100);
  CHECK(now[0].to_mm == 300);
  CHECK(now[1].from_mm == 450);
  CHECK(now[1].to_mm == 550);
  // The part from 200 on is gone: the gap in it too.
  CHECK(carry_gaps(gaps, {{0, 0}, {200, 200}}).size() == 1);
}

TEST_CASE("gaps turn with the start of a closed line") {
  const std::vector<Stretch> now = turn_gaps({{100, 200}, {900, 950}}, 150, 1000);
  REQUIRE(now.size() == 3);
  CHECK(now[0].from_mm == 0);
  CHECK(now[0].to_mm == 50);
  CHECK(now[1].from_mm == 750);
  CHECK(now[2].from_mm == 950);
  CHECK(now[2].to_mm == 1000);
}

TEST_CASE("a gap follows its piece when an earlier one grows or goes") {
  Scenario s = straight(500);
  s.course.pieces.push_back(straight_of(300));
  s.course.gaps_mm = {{600, 650}};
  CHECK(with_piece_changed(s, 0, straight_of(700))->course.gaps_mm[0].from_mm == 800);
  CHECK(with_piece_inserted(s, 0, straight_of(50))->course.gaps_mm[0].from_mm == 650);
  CHECK(with_piece_removed(s, 0)->course.gaps_mm[0].from_mm == 100);
  CHECK(with_piece_removed(s, 1)->course.gaps_mm.empty());
}
