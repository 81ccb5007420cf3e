// The desk: history, the last good drive, the cursor. What is expected follows from web/panel/desk.h; no
// outside source.
#include "web/panel/desk.h"

#include "engine/scenario/same.h"
#include "tests/catch.h"

using namespace lw;
using namespace lw::panel;

namespace {

/// A model tram on an oval.
Scenario tram() {
  Scenario s;
  s.title = "Harbour-model tram";
  Piece straight, bend;
  straight.straight_mm = 800.0;
  bend.radius_mm = 350.0;
  bend.turn_deg = 180.0;
  s.course.pieces = {straight, bend, straight, bend};
  return s;
}

Desk desk_with(const Scenario& scenario) {
  Desk desk;
  desk.scenario = scenario;
  redrive(desk);
  return desk;
}

}  // namespace

TEST_CASE("a whole drag is one step of undo") {
  Desk desk = desk_with(tram());
  begin_edit(desk);
  for (double kp : {0.31, 0.35, 0.4}) {
    desk.scenario.controller.kp = kp;
    touch(desk);
    redrive(desk);
  }
  end_edit(desk);
  CHECK(desk.history.past.size() == 1);
  undo(desk);
  CHECK(same(desk.scenario, tram()));
  redo(desk);
  CHECK(desk.scenario.controller.kp == 0.4);
  CHECK_FALSE(can_redo(desk));
}

TEST_CASE("an edit that changes nothing is no step, and one that is cancelled leaves no trace") {
  Desk desk = desk_with(tram());
  begin_edit(desk);
  end_edit(desk);
  CHECK_FALSE(can_undo(desk));
  begin_edit(desk);
  desk.scenario.controller.kp = 2.0;
  touch(desk);
  cancel_edit(desk);
  CHECK(same(desk.scenario, tram()));
  CHECK_FALSE(can_undo(desk));
}

TEST_CASE("a new edit takes away what could be redone") {
  Desk desk = desk_with(tram());
  edit(desk, [](Scenario& s) { s.controller.kp = 0.5; });
  undo(desk);
  REQUIRE(can_redo(desk));
  edit(desk, [](Scenario& s) { s.controller.ki = 0.001; });
  CHECK_FALSE(can_redo(desk));
}

TEST_CASE("a scenario that cannot be driven leaves the last good drive, and says where, what and why") {
  Desk desk = desk_with(tram());
  REQUIRE(has_drive(desk));
  const std::uint64_t hash = desk.good.hash;
  edit(desk, [](Scenario& s) { s.course.pieces.pop_back(); });
  redrive(desk);
  REQUIRE(desk.error);
  CHECK_FALSE(desk.error->where.empty());
  CHECK_FALSE(desk.error->why.empty());
  CHECK(desk.good.hash == hash);
  CHECK(same(desk.good.scenario, tram()));
  undo(desk);
  redrive(desk);
  CHECK_FALSE(desk.error);
  CHECK(desk.good.hash == hash);
}

TEST_CASE("a changed gain keeps the ground, a wider line does not") {
  Desk desk = desk_with(tram());
  const Ground* ground = desk.good.plan.ground.get();
  edit(desk, [](Scenario& s) { s.controller.kp = 0.35; });
  redrive(desk);
  CHECK(desk.good.plan.ground.get() == ground);
  edit(desk, [](Scenario& s) { s.course.line_mm = 24.0; });
  redrive(desk);
  CHECK(desk.good.plan.ground.get() != ground);
}

TEST_CASE("the cursor stays within the drive, and playback stops at its end") {
  Desk desk = desk_with(tram());
  const double end = desk.good.trace.rows.back().t;
  set_cursor(desk, -1.0);
  CHECK(desk.playback.cursor == 0.0);
  desk.playback.playing = true;
  desk.playback.rate = 8.0;
  play_on(desk, 0.25);
  CHECK(desk.playback.cursor == Approx(2.0));
  CHECK(desk.animate);
  play_on(desk, 1e6);
  CHECK(desk.playback.cursor == end);
  CHECK_FALSE(desk.playback.playing);
}

TEST_CASE("between two rows the pose goes on evenly and commands hold") {
  Trace trace;
  trace.rows.resize(2);
  trace.rows[1].t = 0.01;
  trace.rows[1].x = 0.004;
  trace.rows[0].left = 0.3;
  trace.rows[1].left = 0.7;
  const TraceRow row = between_rows(trace, 0.0025);
  CHECK(row.x == Approx(0.001));
  CHECK(row.left == 0.3);
  CHECK(row_at(trace, 0.0099) == 0);
  CHECK(row_at(trace, 0.01) == 1);
  CHECK(row_at(Trace{}, 1.0) == 0);
}

TEST_CASE("what is kept stays while the scenario changes") {
  Desk desk = desk_with(tram());
  keep(desk);
  edit(desk, [](Scenario& s) { s.controller.base_pct = 55.0; });
  redrive(desk);
  REQUIRE(desk.kept);
  CHECK(same(desk.kept->scenario, tram()));
  CHECK(desk.kept->summary.time > desk.good.summary.time);
  drop_kept(desk);
  CHECK_FALSE(desk.kept);
}
