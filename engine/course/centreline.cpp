#include "engine/course/centreline.h"

#include <algorithm>
#include <cmath>

#include "engine/course/sampling.h"

namespace lw {
namespace {

Result<bool> check_gaps(const Course& course, double length) {
  const double length_mm = length * 1e3;
  for (std::size_t i = 0; i < course.gaps_mm.size(); ++i) {
    const Stretch& gap = course.gaps_mm[i];
    const std::string where = place_text("course.gaps_mm", i);
    const std::string what = "[" + rounded_text(gap.from_mm) + ", " + rounded_text(gap.to_mm) + "]";
    if (!std::isfinite(gap.from_mm) || !std::isfinite(gap.to_mm))
      return Error{where, what, "must be finite numbers"};
    if (gap.from_mm >= gap.to_mm) return Error{where, what, "a gap must end after it begins"};
    if (gap.from_mm < 0.0 || gap.to_mm > length_mm + 1e-6)
      return Error{where, what, "a gap must lie on the course, from 0 to " + rounded_text(length_mm) + " mm"};
    for (std::size_t j = 0; j < i; ++j) {
      const Stretch& other = course.gaps_mm[j];
      if (gap.from_mm < other.to_mm && other.from_mm < gap.to_mm)
        return Error{where, what, "overlaps the gap before it in the list, " + place_text("gaps_mm", j)};
    }
  }
  return true;
}

/// On the arc of one sample: how far along it the foot of (x, y) lies, and the distance to the left of it.
Foot foot_on(const Node& node, double x, double y) {
  const double dx = x - node.x, dy = y - node.y, k = node.curvature;
  const double u = dx * node.tangent_x + dy * node.tangent_y;
  const double w = dy * node.tangent_x - dx * node.tangent_y;
  if (std::fabs(k) < 1e-9) return {u, w};
  const double across = 1.0 - k * w;
  const double root = std::sqrt(across * across + k * k * u * u);
  return {direction_angle(across, k * u) / k, (2.0 * w - k * (u * u + w * w)) / (1.0 + root)};
}

}  // namespace

Result<Centreline> make_centreline(const Course& course, double window_m) {
  if (course.pieces.empty() && course.points_mm.empty())
    return Error{"course", "neither pieces nor points_mm", "a course needs one of them"};
  if (!course.pieces.empty() && !course.points_mm.empty())
    return Error{"course", "both pieces and points_mm", "a course is made of one of them"};
  Result<Centreline> line = course.pieces.empty() ? join_points(course) : lay_pieces(course);
  if (!line) return line;
  const Result<bool> gaps = check_gaps(course, line->length);
  if (!gaps) return gaps.error();
  line->gaps_mm = course.gaps_mm;
  std::sort(line->gaps_mm.begin(), line->gaps_mm.end(),
            [](const Stretch& a, const Stretch& b) { return a.from_mm < b.from_mm; });
  line->window = std::min(window_m, course.closed ? 0.5 * line->length : line->length);
  find_reach(*line);
  return line;
}

CoursePoint point_at(const Centreline& line, double s) {
  if (line.closed) s -= line.length * std::floor(s / line.length);
  const double last = static_cast<double>(line.nodes.size() - 1);
  const double index = std::min(std::max(std::floor(s / line.pitch), 0.0), last);
  const Node& node = line.nodes[static_cast<std::size_t>(index)];
  const double along = s - index * line.pitch;
  const bool beyond = !line.closed && (s < 0.0 || s >= line.length);
  const double k = beyond ? 0.0 : node.curvature;
  const Vector half = direction_at(0.5 * k * along);
  const double chord = k == 0.0 ? along : 2.0 * half.y / k;
  const Vector towards = turned({node.tangent_x, node.tangent_y}, half);
  const Vector tangent = turned(towards, half);
  return {node.x + chord * towards.x, node.y + chord * towards.y, tangent.x, tangent.y, k};
}

Foot nearest_foot(const Centreline& line, double x, double y) {
  const std::size_t n = line.nodes.size();
  std::size_t nearest = 0;
  double least = 1e300;
  for (std::size_t i = 0; i < n; ++i) {
    const double dx = x - line.nodes[i].x, dy = y - line.nodes[i].y, d = dx * dx + dy * dy;
    if (d < least) least = d, nearest = i;
  }
  Foot foot = foot_on(line.nodes[nearest], x, y);
  const bool before = nearest == 0 && !line.closed, after = nearest + 1 == n && !line.closed;
  if (foot.s < 0.0 && !before) {
    nearest = (nearest + n - 1) % n;
    foot = foot_on(line.nodes[nearest], x, y);
  }
  // Outside a corner the foot is the corner itself, and neither arc reaches it.
  const double along = std::min(std::max(foot.s, before ? foot.s : 0.0), after ? foot.s : line.pitch);
  if (along != foot.s) foot.deviation = foot.deviation < 0.0 ? -std::sqrt(least) : std::sqrt(least);
  return {static_cast<double>(nearest) * line.pitch + along, foot.deviation};
}

}  // namespace lw
