#include "web/view/course_points.h"

#include <algorithm>
#include <numeric>

#include "engine/course/stroke.h"
#include "engine/scenario/fields.h"
#include "web/view/course_gaps.h"
#include "web/view/tidy.h"

namespace lw::view {
namespace {

Point tidy_point(Point p) { return {tidy(p.x_mm, 0.1), tidy(p.y_mm, 0.1)}; }

Error wrong_kind() {
  return {"course", "exact pieces", "this course is made of pieces: turn it into drawn points first"};
}
Error no_point(std::size_t index) {
  return {"course.points_mm[" + std::to_string(index) + "]", "", "there is no such point"};
}

/// What counts as one place, as straight, as long enough, for a hand that trembles by `coarse` mm.
StrokeSettings settings_for(double coarse) {
  StrokeSettings settings;
  settings.tolerance_mm = std::max(coarse, 0.5);
  settings.closing_mm = std::max(10.0 * coarse, 15.0);
  settings.length_least_mm = std::max(10.0 * coarse, 30.0);
  return settings;
}

bool made_of_pieces(const Scenario& scenario) { return !scenario.course.pieces.empty(); }

}  // namespace

bool is_corner(const Course& course, std::size_t index) {
  return std::find(course.corners.begin(), course.corners.end(), static_cast<int>(index)) !=
         course.corners.end();
}

Result<Scenario> with_point_moved(const Scenario& scenario, std::size_t index, Point to) {
  if (made_of_pieces(scenario)) return wrong_kind();
  if (index >= scenario.course.points_mm.size()) return no_point(index);
  Scenario out = scenario;
  out.course.points_mm[index] = tidy_point(to);
  carry_point_gaps(out.course, scenario.course, {});
  return out;
}

Result<Scenario> with_point_inserted(const Scenario& scenario, std::size_t index, Point at) {
  if (made_of_pieces(scenario)) return wrong_kind();
  const std::size_t count = scenario.course.points_mm.size();
  if (index > count) return no_point(index);
  if (count >= most_points) return Error{"course.points_mm", "", "the course has too many points already"};
  Scenario out = scenario;
  Course& course = out.course;
  course.points_mm.insert(course.points_mm.begin() + static_cast<std::ptrdiff_t>(index), tidy_point(at));
  for (int& corner : course.corners) corner += corner >= static_cast<int>(index) ? 1 : 0;
  std::vector<int> now(count);
  for (std::size_t i = 0; i < count; ++i) now[i] = static_cast<int>(i < index ? i : i + 1);
  carry_point_gaps(course, scenario.course, now);
  return out;
}

Result<Scenario> with_point_deleted(const Scenario& scenario, std::size_t index) {
  if (made_of_pieces(scenario)) return wrong_kind();
  const std::size_t count = scenario.course.points_mm.size();
  if (index >= count) return no_point(index);
  const std::size_t least = scenario.course.closed ? 3 : 2;
  if (count <= least)
    return Error{"course.points_mm", "",
                 scenario.course.closed ? "a closed course needs three points at least"
                                        : "a course needs two points at least"};
  Scenario out = scenario;
  Course& course = out.course;
  course.points_mm.erase(course.points_mm.begin() + static_cast<std::ptrdiff_t>(index));
  const int gone = static_cast<int>(index), last = static_cast<int>(count) - 2;
  std::erase(course.corners, gone);
  for (int& corner : course.corners) corner -= corner > gone ? 1 : 0;
  if (!course.closed) std::erase_if(course.corners, [last](int c) { return c == 0 || c == last; });
  std::vector<int> now(count);
  for (std::size_t i = 0; i < count; ++i) now[i] = static_cast<int>(i < index ? i : i - 1);
  now[index] = -1;
  carry_point_gaps(course, scenario.course, now);
  return out;
}

Result<Scenario> with_corner(const Scenario& scenario, std::size_t index, bool sharp) {
  if (made_of_pieces(scenario)) return wrong_kind();
  const std::size_t count = scenario.course.points_mm.size();
  if (index >= count) return no_point(index);
  if (sharp && !scenario.course.closed && (index == 0 || index + 1 == count))
    return Error{"course.corners", "", "the end of an open line cannot be a corner"};
  Scenario out = scenario;
  std::vector<int>& corners = out.course.corners;
  std::erase(corners, static_cast<int>(index));
  if (sharp)
    corners.insert(std::upper_bound(corners.begin(), corners.end(), static_cast<int>(index)),
                   static_cast<int>(index));
  carry_point_gaps(out.course, scenario.course, {});
  return out;
}

Result<Scenario> with_stroke(const Scenario& scenario, std::span<const Point> stroke, double coarse) {
  Result<Stroke> drawn = simplify_stroke({stroke.begin(), stroke.end()}, settings_for(coarse));
  if (!drawn) return drawn.error();
  Scenario out = scenario;
  const double line_mm = out.course.line_mm;
  out.course = {};
  out.course.line_mm = line_mm;
  out.course.closed = drawn->closed;
  out.course.points_mm = std::move(drawn->points_mm);
  out.course.corners = std::move(drawn->corners);
  return out;
}

Result<Scenario> with_stroke_appended(const Scenario& scenario, std::span<const Point> stroke,
                                      double coarse) {
  if (made_of_pieces(scenario)) return wrong_kind();
  if (scenario.course.closed || scenario.course.points_mm.empty())
    return Error{"course", "", "only an open course has an end to carry on from"};
  // From the last point itself, wherever near it the hand came down.
  std::vector<Point> places(stroke.begin(), stroke.end());
  if (!places.empty()) places.front() = scenario.course.points_mm.back();
  const Result<Stroke> drawn = simplify_stroke(places, settings_for(coarse));
  if (!drawn) return drawn.error();
  if (drawn->closed)
    return Error{"course", "", "a loop that comes back to the end of the course is not carried on"};
  Scenario out = scenario;
  Course& course = out.course;
  const int before = static_cast<int>(course.points_mm.size());
  if (course.points_mm.size() + drawn->points_mm.size() - 1 > most_points)
    return Error{"course.points_mm", "", "the course has too many points already"};
  course.points_mm.insert(course.points_mm.end(), drawn->points_mm.begin() + 1, drawn->points_mm.end());
  for (const int corner : drawn->corners)
    if (corner > 0) course.corners.push_back(before - 1 + corner);
  std::vector<int> same(static_cast<std::size_t>(before));
  std::iota(same.begin(), same.end(), 0);
  carry_point_gaps(course, scenario.course, same);
  return out;
}

}  // namespace lw::view
