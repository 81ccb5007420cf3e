// The tools of the floor, worked by hand without a window: what a press or a drag makes of the scenario.
#include <imgui.h>

#include <cmath>

#include "tests/catch.h"
#include "tests/web/hand.h"
#include "web/view/course_pieces.h"
#include "web/view/course_points.h"
#include "web/view/floor_view.h"

using namespace lw;
using namespace lw::view;
using panel::Tool;

namespace {

/// The floor alone, over the whole screen, and a hand on it.
struct Bank {
  panel::Desk desk;
  lw::view::FloorView shown;
  std::unique_ptr<Hand> hand;

  explicit Bank(Course course, Tool tool = Tool::look) {
    desk.scenario.course = std::move(course);
    desk.scenario.controller.base_pct = 20;
    desk.tool = tool;
    hand = std::make_unique<Hand>([this] {
      desk.layout.floor = {0, 0, ImGui::GetIO().DisplaySize.x, ImGui::GetIO().DisplaySize.y};
      panel::redrive(desk);
      show_floor(shown, desk);
    });
    REQUIRE_FALSE(desk.error);
  }
  const Course& course() const { return desk.scenario.course; }
  Pixel at(double x_mm, double y_mm) const { return to_screen(shown.view, x_mm, y_mm); }

  void press(double x_mm, double y_mm) {
    const Pixel p = at(x_mm, y_mm);
    hand->move(p.x, p.y);
    hand->frame();
    hand->press();
    hand->frame();
  }
  void drag_to(double x_mm, double y_mm) {
    const Pixel to = at(x_mm, y_mm), from{ImGui::GetIO().MousePos.x, ImGui::GetIO().MousePos.y};
    for (int i = 1; i <= 12; ++i) {
      const float share = static_cast<float>(i) / 12.0f;
      hand->move(from.x + share * (to.x - from.x), from.y + share * (to.y - from.y));
      hand->frame();
    }
    hand->frame();  // what the last movement made is driven
  }
  void press_twice(double x_mm, double y_mm) {
    for (int i = 0; i < 2; ++i) {
      press(x_mm, y_mm);
      lift();
    }
  }
  void lift() {
    hand->release();
    hand->frame(2);
  }
  void drag(double x0, double y0, double x1, double y1) {
    press(x0, y0);
    drag_to(x1, y1);
    lift();
  }
  std::size_t steps() const { return desk.history.past.size(); }
};

Course drawn() {
  Course course;
  course.points_mm = {{0, 0}, {600, -40}, {1200, 0}, {1400, 400}, {1000, 800}, {300, 800}, {-200, 400}};
  return course;
}

Course oval() {
  Course course;
  course.pieces = {straight_of(800), bend_of(350, 180), straight_of(800), bend_of(350, 180)};
  return course;
}

Course straight() {
  Course course;
  course.closed = false;
  course.pieces = {straight_of(1000)};
  return course;
}

}  // namespace

TEST_CASE("the whole course is in view at first, with the vehicle on it") {
  Bank bank(oval());
  for (const Point p : {Point{-350, 0}, Point{1150, 700}}) {
    const Pixel on_screen = bank.at(p.x_mm, p.y_mm);
    CHECK(bank.shown.view.frame.holds(on_screen));
  }
  CHECK(ImGui::GetDrawData()->TotalVtxCount > 500);
}

TEST_CASE("looking: dragging the floor moves it, the wheel comes nearer, the path is followed in time") {
  Bank bank(oval());
  const Pixel before = bank.at(400, 350);
  bank.drag(400, 350, 500, 350);
  CHECK(bank.at(400, 350).x > before.x + 20);
  CHECK(bank.steps() == 0);
  const double scale = bank.shown.view.scale;
  bank.hand->wheel(1);
  bank.hand->frame();
  CHECK(bank.shown.view.scale > scale);
  bank.press(600, 0);
  CHECK(panel::between_rows(bank.desk.good.trace, bank.desk.playback.cursor).progress ==
        Approx(0.6).margin(0.03));
  bank.drag_to(700, 0);
  bank.lift();
  CHECK(panel::between_rows(bank.desk.good.trace, bank.desk.playback.cursor).progress ==
        Approx(0.7).margin(0.03));
  bank.hand->click("Fit");
  CHECK(bank.shown.view.scale == Approx(scale));
}

TEST_CASE("drawing: a stroke becomes the course, closed when it comes back, in one step of undo") {
  Bank bank(straight(), Tool::draw);
  bank.press(200, 200);
  for (int i = 1; i <= 60; ++i) {
    const double angle = 2 * 3.14159265 * i / 60;
    bank.drag_to(500 - 300 * std::cos(angle), 200 + 250 * std::sin(angle));
  }
  bank.lift();
  CHECK_FALSE(bank.desk.error);
  CHECK(bank.course().pieces.empty());
  CHECK(bank.course().closed);
  CHECK(bank.course().points_mm.size() > 3);
  CHECK(bank.course().points_mm.size() < 40);
  CHECK(bank.steps() == 1);
  panel::undo(bank.desk);
  CHECK(bank.course().pieces.size() == 1);
}

TEST_CASE("drawing: what is too short is refused in words and changes nothing") {
  Bank bank(straight(), Tool::draw);
  bank.press(200, 200);
  bank.lift();
  CHECK(bank.course().pieces.size() == 1);
  CHECK(bank.steps() == 0);
  CHECK(bank.desk.notice.bad);
}

TEST_CASE("drawing: a stroke from the end of an open course carries it on") {
  Course course;
  course.closed = false;
  course.points_mm = {{0, 0}, {400, 0}};
  Bank bank(course, Tool::draw);
  bank.press(400, 0);
  bank.drag_to(700, 100);
  bank.lift();
  REQUIRE(bank.course().points_mm.size() > 2);
  CHECK(bank.course().points_mm[1].x_mm == 400);
  CHECK(bank.course().points_mm.back().x_mm == Approx(700).margin(8));
}

TEST_CASE("points: dragged, added by a press on the line, made corners by pressing twice, deleted") {
  Bank bank(drawn(), Tool::points);
  const std::uint64_t drives = bank.desk.good.revision;
  bank.press(1200, 0);
  bank.drag_to(1250, -60);
  CHECK(bank.desk.good.revision > drives + 5);  // driven again while it moves
  bank.lift();
  CHECK(bank.course().points_mm[2].x_mm == Approx(1250).margin(3));
  CHECK(bank.steps() == 1);
  bank.hand->frame(30);
  const CoursePoint middle = point_at(bank.desk.good.plan.ground->line, 0.3);
  bank.drag(1e3 * middle.x, 1e3 * middle.y, 1e3 * middle.x, 1e3 * middle.y);
  CHECK(bank.course().points_mm.size() == 8);
  CHECK(bank.desk.selection.point == 1);
  bank.hand->frame(60);
  const Point chosen = bank.course().points_mm[3];
  bank.press_twice(chosen.x_mm, chosen.y_mm);
  CHECK(is_corner(bank.course(), 3));
  bank.hand->click("Smooth");
  CHECK_FALSE(is_corner(bank.course(), 3));
  bank.hand->key(ImGuiKey_Delete);
  CHECK(bank.course().points_mm.size() == 7);
}

TEST_CASE("points: dragged onto another, the last good course stays and the point springs back") {
  Bank bank(drawn(), Tool::points);
  // Dear ImGui gives the pointer in whole pixels: with this view, point 0 lies on one.
  bank.shown.view.centre_x = 600, bank.shown.view.centre_y = 400, bank.shown.view.scale = 0.5;
  bank.shown.moved_by_hand = true;
  bank.press(600, -40);
  bank.drag_to(0, 0);
  REQUIRE(bank.desk.error);
  bank.lift();
  bank.hand->frame(2);
  CHECK_FALSE(bank.desk.error);
  CHECK(bank.course().points_mm[1].x_mm > 5);
  CHECK(bank.desk.notice.bad);
}

TEST_CASE("Escape and a second finger drop what was begun") {
  Bank bank(drawn(), Tool::points);
  bank.press(1200, 0);
  bank.drag_to(1300, -100);
  bank.hand->key(ImGuiKey_Escape);
  CHECK(bank.course().points_mm[2].x_mm == 1200);
  bank.lift();
  bank.press(1200, 0);
  bank.drag_to(1300, -100);
  const Pixel middle = bank.at(500, 300);
  const double scale = bank.shown.view.scale;
  pinch_floor(bank.shown, bank.desk, {app::Pinch::began, middle.x, middle.y, 0, 0, 1});
  pinch_floor(bank.shown, bank.desk, {app::Pinch::moved, middle.x, middle.y, 0, 0, 2});
  CHECK(bank.course().points_mm[2].x_mm == 1200);
  CHECK(bank.shown.view.scale == Approx(2 * scale));
  CHECK(bank.at(500, 300).x == Approx(middle.x).margin(0.1));
  bank.lift();
  CHECK(bank.steps() == 0);
}

TEST_CASE("pieces: chosen by a press, reshaped by their handle, added with their measures") {
  Bank bank(straight(), Tool::points);
  bank.drag(500, 0, 500, 0);
  CHECK(bank.desk.selection.piece == 0);
  bank.drag(1000, 0, 1200, 0);
  CHECK(*bank.course().pieces[0].straight_mm == Approx(1200).margin(6));
  bank.hand->click("+ Left");
  REQUIRE(bank.course().pieces.size() == 2);
  CHECK(bank.desk.selection.piece == 1);
  CHECK(*bank.course().pieces[1].radius_mm == 250);
  bank.hand->click("Right");
  CHECK(*bank.course().pieces[1].turn_deg == -90);
  bank.hand->click("+ Corner");
  CHECK(bank.course().pieces.size() == 4);
  CHECK_FALSE(bank.desk.error);
  const std::size_t steps = bank.steps();
  bank.hand->click("Closed");
  CHECK_FALSE(bank.desk.error);
  CHECK(bank.course().closed);
  CHECK(bank.course().pieces.size() > 4);
  CHECK(bank.steps() == steps + 1);
  bank.hand->click("As points");
  CHECK_FALSE(bank.desk.error);
  CHECK(bank.course().pieces.empty());
  CHECK(bank.course().corners.size() == 1);
}

TEST_CASE("gaps: drawn along the line, changed by their ends, removed by pressing twice") {
  Bank bank(oval(), Tool::gaps);
  bank.drag(300, 0, 450, 0);
  REQUIRE(bank.course().gaps_mm.size() == 1);
  CHECK(bank.course().gaps_mm[0].from_mm == Approx(300).margin(4));
  CHECK(bank.course().gaps_mm[0].to_mm == Approx(450).margin(4));
  bank.hand->frame(60);
  bank.drag(450, 0, 520, 0);
  CHECK(bank.course().gaps_mm[0].to_mm == Approx(520).margin(4));
  bank.hand->frame(60);
  // Through the start: back from 60 mm behind it to 60 mm before.
  bank.drag(60, 0, -60, 5);
  CHECK(bank.course().gaps_mm.size() == 3);
  bank.hand->frame(60);
  bank.press_twice(400, 0);
  CHECK(bank.course().gaps_mm.size() == 2);
  CHECK(bank.steps() == 4);
}

TEST_CASE("start: dragged along a closed course, which stays where it is, and turned round") {
  Bank bank(oval(), Tool::start);
  bank.drag(0, 0, 500, 0);
  CHECK_FALSE(bank.desk.error);
  CHECK(bank.course().start_mm.x_mm == Approx(500).margin(8));
  CHECK(bank.desk.good.plan.ground->line.length == Approx(1.6 + 0.7 * 3.14159265).epsilon(1e-4));
  bank.hand->click("Turn the course round");
  CHECK(std::fabs(bank.course().heading_deg) == 180);
  CHECK(bank.steps() == 2);
}
