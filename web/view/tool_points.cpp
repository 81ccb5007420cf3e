// Moving, adding and removing the points of a drawn course.
#include <algorithm>

#include "web/view/bench.h"
#include "web/view/course_points.h"

namespace lw::view {
namespace {

int point_under(const Bench& bench) {
  int nearest = -1;
  float least = 1.4f * bench.pointer.reach;
  const auto& points = bench.course().points_mm;
  for (std::size_t i = 0; i < points.size(); ++i) {
    const float d = distance(bench.pointer.at, screen_of(bench, points[i]));
    if (d < least) least = d, nearest = static_cast<int>(i);
  }
  return nearest;
}

/// Between which drawn points a place of the line lies: the number that a new point there gets.
std::size_t number_at(const Bench& bench, double s) {
  const auto& marks = bench.floor.marks;
  return static_cast<std::size_t>(std::upper_bound(marks.begin(), marks.end(), 1e3 * s) - marks.begin());
}

void press(Bench& bench, int under, const std::optional<double>& place) {
  panel::Desk& desk = bench.desk;
  if (under >= 0) {
    desk.selection = {};
    desk.selection.point = under;
    if (bench.pointer.twice) {
      const auto index = static_cast<std::size_t>(under);
      edit_at_once(bench, with_corner(desk.scenario, index, !is_corner(bench.course(), index)));
      return;
    }
    take(bench, Grip::point, under);
    return;
  }
  desk.selection = {};
  if (!place || bench.floor.marks.empty()) return grip_floor(bench);
  const std::size_t index = number_at(bench, *place);
  const CoursePoint at = point_at(bench.line(), *place);
  Held& held = take(bench, Grip::point, static_cast<int>(index));
  attempt(bench, with_point_inserted(desk.scenario, index, {1e3 * at.x, 1e3 * at.y}));
  held.base = desk.scenario;
  desk.selection.point = static_cast<int>(index);
}

void draw_points(const Bench& bench, int under) {
  const auto& points = bench.course().points_mm;
  if (bench.desk.error) {  // what was asked for, while the last good course lies there
    std::vector<ImVec2> way;
    for (const Point& p : points) way.push_back(vec(screen_of(bench, p)));
    bench.draw.AddPolyline(way.data(), static_cast<int>(way.size()), bench.theme.bad,
                           bench.course().closed ? ImDrawFlags_Closed : 0, 1.5f);
  }
  for (std::size_t i = 0; i < points.size(); ++i) {
    const Pixel at = screen_of(bench, points[i]);
    const Frame& frame = bench.floor.view.frame;
    if (at.x < frame.x - 20 || at.y < frame.y - 20 || at.x > frame.x + frame.width + 20 ||
        at.y > frame.y + frame.height + 20)
      continue;
    const int index = static_cast<int>(i);
    draw_spot(bench, at, bench.desk.selection.point == index, under == index, is_corner(bench.course(), i));
  }
}

}  // namespace

void work_points(Bench& bench) {
  if (!bench.course().pieces.empty()) return work_pieces(bench);
  panel::Desk& desk = bench.desk;
  Held& held = bench.floor.held;
  const Pointer& hand = bench.pointer;
  const int under = bench.idle() && hand.over ? point_under(bench) : -1;
  std::optional<double> place;
  if (bench.idle() && hand.over && under < 0 && bench.in_step()) place = line_under(bench, hand.at);
  if (hand.pressed && bench.idle()) press(bench, under, place);
  if (held.grip == Grip::point && hand.held && moving(bench))
    attempt(bench, with_point_moved(held.base, static_cast<std::size_t>(held.index),
                                    to_floor(bench.floor.view, hand.at)));
  if (bench.idle() && hand.remove && desk.selection.point >= 0) {
    const auto index = static_cast<std::size_t>(desk.selection.point);
    if (edit_at_once(bench, with_point_deleted(desk.scenario, index))) desk.selection = {};
  }
  draw_points(bench, under);
  if (place && hand.reach < 15) {  // where a new point would come to lie
    const Pixel at = screen_of(bench, point_at(bench.line(), *place));
    bench.draw.AddCircle(vec(at), 7.0f * bench.unit, bench.theme.accent, 0, 2.0f);
    bench.draw.AddLine({at.x - 4, at.y}, {at.x + 4, at.y}, bench.theme.accent, 2.0f);
    bench.draw.AddLine({at.x, at.y - 4}, {at.x, at.y + 4}, bench.theme.accent, 2.0f);
  }
  if (under >= 0) ImGui::SetMouseCursor(ImGuiMouseCursor_Hand);
}

}  // namespace lw::view
