#include "web/view/keep_closed.h"

#include <cmath>
#include <numbers>
#include <vector>

#include "web/view/course_pieces.h"
#include "web/view/tidy.h"

namespace lw::view {
namespace {

constexpr double per_degree = std::numbers::pi / 180.0;
constexpr double shrunk_most = 0.2;

struct Lever {
  double x = 0, y = 0;      // the end's move per unit of the value
  double* value = nullptr;  // length or radius, mm; null for a corner
};

Lever lever_of(Piece& piece, double heading_deg) {
  const double then = heading_deg * per_degree;
  if (piece.straight_mm) return {std::cos(then), std::sin(then), &*piece.straight_mm};
  if (!piece.radius_mm || !piece.turn_deg || *piece.radius_mm == 0.0) return {};
  const double now = then + *piece.turn_deg * per_degree, side = *piece.turn_deg > 0 ? 1.0 : -1.0;
  return {side * (std::sin(now) - std::sin(then)), side * (std::cos(then) - std::cos(now)),
          &*piece.radius_mm};
}

}  // namespace

std::optional<Course> kept_closed(Course course, std::size_t index) {
  const std::vector<Joint> joints = joints_of(course);
  const double turned = joints.back().heading_deg - course.heading_deg;
  if (std::fabs(turned - 360.0 * std::rint(turned / 360.0)) > 0.05) return {};
  std::vector<Lever> levers;
  double xx = 0, xy = 0, yy = 0;
  for (std::size_t i = 0; i < course.pieces.size(); ++i) {
    const Lever lever = lever_of(course.pieces[i], joints[i].heading_deg);
    if (i == index || !lever.value) continue;
    const double weight = *lever.value * *lever.value;
    xx += weight * lever.x * lever.x, xy += weight * lever.x * lever.y, yy += weight * lever.y * lever.y;
    levers.push_back(lever);
  }
  const double missing_x = course.start_mm.x_mm - joints.back().at.x_mm;
  const double missing_y = course.start_mm.y_mm - joints.back().at.y_mm;
  // A hair on the diagonal: pieces all in one direction can still make good what is missing in that
  // direction.
  const double hair = 1e-9 * (xx + yy);
  const double size = (xx + hair) * (yy + hair) - xy * xy;
  if (!(size > 0.0)) return {};
  const double pull_x = ((yy + hair) * missing_x - xy * missing_y) / size;
  const double pull_y = ((xx + hair) * missing_y - xy * missing_x) / size;
  for (const Lever& lever : levers) {
    const double before = *lever.value;
    const double after = before + before * before * (lever.x * pull_x + lever.y * pull_y);
    if (after < shrunk_most * before) return {};
    *lever.value = tidy(after, 0.01);
  }
  const Point end = joints_of(course).back().at;
  if (std::hypot(end.x_mm - course.start_mm.x_mm, end.y_mm - course.start_mm.y_mm) > 0.4) return {};
  return course;
}

}  // namespace lw::view
