// Drawing the course with one stroke of the hand.
#include "web/view/bench.h"
#include "web/view/course_points.h"

namespace lw::view {
namespace {

/// Whether the pointer is by the end of an open, drawn course, from where a stroke carries on.
bool by_the_end(const Bench& bench) {
  const Course& course = bench.course();
  if (course.closed || course.points_mm.empty() || !course.pieces.empty()) return false;
  return distance(bench.pointer.at, screen_of(bench, course.points_mm.back())) < 1.6f * bench.pointer.reach;
}

void draw_stroke(const Bench& bench) {
  std::vector<Pixel> points;
  for (const Point& p : bench.floor.held.stroke) points.push_back(screen_of(bench, p));
  Mesh mesh;
  const auto half = static_cast<float>(0.5 * bench.course().line_mm * bench.floor.view.scale);
  add_trail(mesh, points, std::vector<ImU32>{panel::faded(bench.theme.accent, 0.55f)}, std::max(half, 2.0f));
  put(mesh, bench.draw);
}

}  // namespace

void work_draw(Bench& bench) {
  Held& held = bench.floor.held;
  const Pointer& hand = bench.pointer;
  const bool at_end = bench.idle() && by_the_end(bench);
  if (at_end) draw_spot(bench, screen_of(bench, bench.course().points_mm.back()), false, hand.over);
  if (bench.idle() && hand.over) ImGui::SetMouseCursor(ImGuiMouseCursor_None);
  if (bench.idle() && hand.over && hand.reach < 15) {
    const auto half = static_cast<float>(0.5 * bench.course().line_mm * bench.floor.view.scale);
    bench.draw.AddCircleFilled(vec(hand.at), std::max(half, 2.0f), panel::faded(bench.theme.accent, 0.5f));
    bench.draw.AddCircle(vec(hand.at), std::max(half, 2.0f) + 1.5f, bench.theme.accent, 0, 1.5f);
  }
  if (hand.pressed && bench.idle()) {
    Held& now = take(bench, Grip::stroke);
    now.carrying_on = at_end;
    now.stroke.push_back(to_floor(bench.floor.view, hand.at));
  }
  if (held.grip != Grip::stroke) return;
  if (hand.held && distance(hand.at, held.last) > 1.5f) {
    held.stroke.push_back(to_floor(bench.floor.view, hand.at));
    held.last = hand.at;
  }
  draw_stroke(bench);
  if (!hand.released) return;
  const double coarse = 2.5 / bench.floor.view.scale;  // mm: a hand trembles by a few pixels
  const Result<Scenario> drawn = held.carrying_on ? with_stroke_appended(held.base, held.stroke, coarse)
                                                  : with_stroke(held.base, held.stroke, coarse);
  if (!drawn.ok()) panel::complain(bench.desk, drawn.error().why);
  attempt(bench, drawn);
}

}  // namespace lw::view
