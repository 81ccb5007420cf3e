// Drawn points made into a course: parts between sharp corners, each a spline, sampled by arc length.
#include <algorithm>
#include <cmath>

#include "engine/course/sampling.h"
#include "engine/course/spline.h"

namespace lw {
namespace {

constexpr double mm = 1e-3;
constexpr double apart_least = 0.1 * mm;  // m, from a point to the next
constexpr double fold = 3.1;              // rad; a corner that turns further doubles back on itself

std::string point_text(const Point& p) {
  return "[" + rounded_text(p.x_mm) + ", " + rounded_text(p.y_mm) + "]";
}

Result<std::vector<Vector>> checked_points(const Course& course) {
  const std::size_t n = course.points_mm.size(), least = course.closed ? 3 : 2;
  std::vector<Vector> points;
  for (std::size_t i = 0; i < n; ++i) {
    const Point& p = course.points_mm[i];
    const std::string where = place_text("course.points_mm", i);
    if (!std::isfinite(p.x_mm) || !std::isfinite(p.y_mm))
      return Error{where, point_text(p), "must be finite numbers"};
    points.push_back({p.x_mm * mm, p.y_mm * mm});
    if (i > 0 && !(length_of(points[i] - points[i - 1]) >= apart_least))
      return Error{where, point_text(p), "is less than 0.1 mm from the point before it"};
  }
  if (n < least)
    return Error{"course.points_mm", std::to_string(n) + (n == 1 ? " point" : " points"),
                 course.closed ? "a closed course needs at least 3" : "an open course needs at least 2"};
  if (course.closed && !(length_of(points.back() - points.front()) >= apart_least))
    return Error{place_text("course.points_mm", n - 1), point_text(course.points_mm.back()),
                 "repeats the first point; a closed course leads back to it by itself"};
  return points;
}

/// Corner marks, one a point. The ends of an open course are ends already and never marked.
Result<std::vector<bool>> checked_corners(const Course& course) {
  const int n = static_cast<int>(course.points_mm.size());
  std::vector<bool> is_corner(course.points_mm.size(), false);
  for (std::size_t i = 0; i < course.corners.size(); ++i) {
    const int index = course.corners[i];
    if (index < 0 || index >= n)
      return Error{place_text("course.corners", i), std::to_string(index),
                   "must be the number of a point, 0 to " + std::to_string(n - 1)};
    is_corner[index] = course.closed || (index > 0 && index + 1 < n);
  }
  return is_corner;
}

/// One cubic for every point that has a next one.
std::vector<Cubic> cubics_through(const std::vector<Vector>& points, const std::vector<bool>& is_corner,
                                  bool closed) {
  const std::size_t n = points.size();
  std::size_t first = 0;
  if (closed) {
    first = static_cast<std::size_t>(std::find(is_corner.begin(), is_corner.end(), true) - is_corner.begin());
    if (first == n) return spline_through(points, true);
  }
  const std::size_t steps = closed ? n : n - 1;
  std::vector<Cubic> cubics(steps);
  std::vector<Vector> part{points[first]};
  for (std::size_t k = 1; k <= steps; ++k) {
    const std::size_t at = (first + k) % n;
    part.push_back(points[at]);
    if (k < steps && !is_corner[at]) continue;
    const std::vector<Cubic> smooth = spline_through(part, false);
    for (std::size_t i = 0; i < smooth.size(); ++i) cubics[(first + k - smooth.size() + i) % n] = smooth[i];
    part = {points[at]};
  }
  return cubics;
}

/// Goes `step` metres on along a cubic from parameter t: one step of the classical Runge-Kutta method for
/// dt/ds = 1 / |first(t)|. Over a millimetre its error is far below what a double holds of the course.
double further(const Cubic& cubic, double t, double step) {
  const auto rate = [&cubic](double at) { return 1.0 / length_of(cubic.first(at)); };
  const double a = rate(t), b = rate(t + 0.5 * step * a), c = rate(t + 0.5 * step * b),
               d = rate(t + step * c);
  return std::min(t + step / 6.0 * (a + 2.0 * (b + c) + d), cubic.span);
}

double curvature_at(const Cubic& cubic, double t) {
  const Vector first = cubic.first(t);
  const double speed = length_of(first);
  return cross(first, cubic.second(t)) / (speed * speed * speed);
}

void put(Node& node, const Cubic& cubic, double t) {
  const Vector place = cubic.place(t), first = cubic.first(t);
  const double speed = length_of(first);
  node.x = place.x;
  node.y = place.y;
  node.tangent_x = first.x / speed;
  node.tangent_y = first.y / speed;
  node.curvature = curvature_at(cubic, t);
}

/// Fills in the samples with the curvature at each; returns for every sample the number of its cubic.
std::vector<std::size_t> sample(const std::vector<Cubic>& cubics, const std::vector<double>& starts,
                                Centreline& line) {
  std::vector<std::size_t> cubic_of(line.nodes.size());
  std::size_t k = 0;
  double t = 0.0, s_before = 0.0;
  for (std::size_t i = 0; i < line.nodes.size(); ++i) {
    const double s = static_cast<double>(i) * line.pitch;
    for (; k + 1 < cubics.size() && starts[k + 1] <= s + on_sample * line.pitch; ++k) {
      t = 0.0;
      s_before = starts[k + 1];
    }
    t = further(cubics[k], t, s - s_before);
    s_before = s;
    put(line.nodes[i], cubics[k], t);
    cubic_of[i] = k;
  }
  return cubic_of;
}

/// Whether a corner lies after sample i, before or on the next.
bool corner_follows(const Centreline& line, std::size_t i) {
  const double s = (static_cast<double>(i) + on_sample) * line.pitch;
  const bool last = i + 1 == line.nodes.size();
  return std::any_of(line.corners.begin(), line.corners.end(), [&](double corner) {
    return (corner > s && corner <= s + line.pitch) || (last && corner == 0.0);
  });
}

Result<bool> check_bends(const Course& course, const Centreline& line,
                         const std::vector<std::size_t>& cubic_of) {
  const double radius = std::max(radius_least, line.pitch);
  for (std::size_t i = 0; i < line.nodes.size(); ++i) {
    const Node& node = line.nodes[i];
    const Node& next = line.nodes[(i + 1) % line.nodes.size()];
    const bool goes_on = (line.closed || i + 1 < line.nodes.size()) && !corner_follows(line, i);
    const double along = node.tangent_x * next.tangent_x + node.tangent_y * next.tangent_y;
    const double step = length_of(Vector{next.x - node.x, next.y - node.y}) / line.pitch;
    const bool even = along >= 0.5 && step > 0.8 && step < 1.01;
    if (std::fabs(node.curvature) * radius <= 1.0 && (even || !goes_on)) continue;
    const std::size_t at = cubic_of[i];
    return Error{place_text("course.points_mm", at), point_text(course.points_mm[at]),
                 "the line from here to the next point would turn within a radius of less than " +
                     rounded_text(radius / mm) + " mm; move the points apart, or make one a corner"};
  }
  return true;
}

/// From the curvature at each sample to the mean until the next, which is the turn of the tangent over the
/// pitch. Before a corner the curvature at the sample has to do.
void hold_means(Centreline& line) {
  const std::size_t n = line.nodes.size();
  for (std::size_t i = 0; i + (line.closed ? 0 : 1) < n; ++i) {
    Node& node = line.nodes[i];
    const Node& next = line.nodes[(i + 1) % n];
    if (!line.corners.empty() && corner_follows(line, i)) continue;
    const double s = node.tangent_x * next.tangent_y - node.tangent_y * next.tangent_x;
    const double c = node.tangent_x * next.tangent_x + node.tangent_y * next.tangent_y;
    const double q = s * s;  // the arcsine's series; its next term is below 1e-11 here
    const double small = s * (1.0 + q * (1.0 / 6.0 + q * (3.0 / 40.0 + q * (15.0 / 336.0))));
    node.curvature = (q < 0.01 ? small : direction_angle(c, s)) / line.pitch;
  }
}

}  // namespace

Result<Centreline> join_points(const Course& course) {
  const Result<std::vector<Vector>> points = checked_points(course);
  if (!points) return points.error();
  const Result<std::vector<bool>> is_corner = checked_corners(course);
  if (!is_corner) return is_corner.error();
  const std::vector<Cubic> cubics = cubics_through(*points, *is_corner, course.closed);
  std::vector<double> starts;
  double length = 0.0;
  for (const Cubic& cubic : cubics) {
    starts.push_back(length);
    length += length_of(cubic);
  }
  Result<Centreline> line = blank_centreline(length, course.closed);
  if (!line) return line;
  for (std::size_t i = 0; i < cubics.size(); ++i) {
    if (!(*is_corner)[i]) continue;
    line->corners.push_back(starts[i]);
    const Cubic& before = cubics[(i + cubics.size() - 1) % cubics.size()];
    if (std::fabs(angle_between(before.first(before.span), cubics[i].first(0.0))) > fold)
      return Error{place_text("course.points_mm", i), point_text(course.points_mm[i]),
                   "the line doubles back on itself at this corner"};
  }
  const std::vector<std::size_t> cubic_of = sample(cubics, starts, *line);
  const Result<bool> bends = check_bends(course, *line, cubic_of);
  if (!bends) return bends.error();
  hold_means(*line);
  line->sections = sections_of(*line);
  return line;
}

}  // namespace lw
