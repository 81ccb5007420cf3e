#include "web/view/course_whole.h"

#include <algorithm>
#include <cmath>

#include "engine/scenario/fields.h"
#include "web/view/course_gaps.h"
#include "web/view/course_pieces.h"
#include "web/view/course_points.h"
#include "web/view/tidy.h"

namespace lw::view {
namespace {

constexpr double shortest_rest_mm = 10.0;
constexpr double bend_step_deg = 15.0;  // between two drawn points of a bend
constexpr double joint_step_mm = 60.0;  // from the end of a straight to the next point of it

Point tidy_point(const CoursePoint& p) { return {tidy(1e3 * p.x, 0.1), tidy(1e3 * p.y, 0.1)}; }

/// Numbers of the corners after the first `cut` points have gone to the end (closed) or away (open).
std::vector<int> shifted_corners(const Course& course, int cut) {
  std::vector<int> out;
  const int count = static_cast<int>(course.points_mm.size());
  for (const int corner : course.corners) {
    const int now = corner - cut;
    if (now > 0 || (course.closed && now == 0)) out.push_back(now);
    if (now < 0 && course.closed) out.push_back(now + count);
  }
  std::sort(out.begin(), out.end());
  return out;
}

Result<Scenario> points_started_at(const Scenario& scenario, const Centreline& line, double s_mm,
                                   double snap_mm) {
  Scenario out = scenario;
  Course& course = out.course;
  const double length = 1e3 * line.length;
  std::vector<double> marks = marks_of(course, line);
  if (marks.empty()) return Error{"course.points_mm", "", "the course on screen is another one"};
  const auto away = [&](double mark) {
    const double d = std::fabs(mark - s_mm);
    return course.closed ? std::min(d, length - d) : d;
  };
  const auto nearest =
      std::min_element(marks.begin(), marks.end(), [&](double a, double b) { return away(a) < away(b); });
  auto first = static_cast<std::size_t>(nearest - marks.begin());
  if (away(*nearest) > snap_mm) {
    first = static_cast<std::size_t>(std::upper_bound(marks.begin(), marks.end(), s_mm) - marks.begin());
    Result<Scenario> more = with_point_inserted(scenario, first, tidy_point(point_at(line, 1e-3 * s_mm)));
    if (!more) return more;
    out = *more;
  }
  const double by = away(*nearest) > snap_mm ? s_mm : *nearest;
  if (!course.closed && first + 2 > course.points_mm.size())
    return Error{"course", "", "too little of the course would be left"};
  course.corners = shifted_corners(course, static_cast<int>(first));
  const auto cut = course.points_mm.begin() + static_cast<std::ptrdiff_t>(first);
  if (course.closed) {
    std::rotate(course.points_mm.begin(), cut, course.points_mm.end());
    course.gaps_mm = turn_gaps(scenario.course.gaps_mm, by, length);
  } else {
    course.points_mm.erase(course.points_mm.begin(), cut);
    course.gaps_mm = carry_gaps(scenario.course.gaps_mm, {{by, 0.0}, {length, length - by}});
  }
  return out;
}

/// Halves that belonged together, as a start that is moved on again leaves them behind.
bool joined(Piece& piece, const Piece& next) {
  if (piece.straight_mm && next.straight_mm) {
    piece.straight_mm = tidy(*piece.straight_mm + *next.straight_mm, 1e-4);
    return true;
  }
  const bool bends = piece.radius_mm && next.radius_mm && *piece.radius_mm == *next.radius_mm &&
                     *piece.radius_mm > 0 && *piece.turn_deg * *next.turn_deg > 0;
  if (bends) piece.turn_deg = tidy(*piece.turn_deg + *next.turn_deg, 1e-4);
  return bends;
}

/// The piece cut in two at a share of its length.
std::pair<Piece, Piece> halves(const Piece& piece, double share) {
  Piece a = piece, b = piece;
  if (piece.straight_mm) {
    a.straight_mm = tidy(share * *piece.straight_mm, 0.1);
    b.straight_mm = tidy(*piece.straight_mm - *a.straight_mm, 1e-4);
  } else {
    a.turn_deg = tidy(share * *piece.turn_deg, 0.1);
    b.turn_deg = tidy(*piece.turn_deg - *a.turn_deg, 1e-4);
  }
  return {a, b};
}

bool has_length(const Piece& piece) { return length_of_piece(piece) > 0.0; }

Result<Scenario> pieces_started_at(const Scenario& scenario, double s_mm, double snap_mm) {
  Scenario out = scenario;
  Course& course = out.course;
  std::vector<Joint> joints = joints_of(course);
  const double length = joints.back().s_mm;
  std::size_t first = 0;
  while (first + 1 < course.pieces.size() && joints[first + 1].s_mm <= s_mm) ++first;
  const double into = s_mm - joints[first].s_mm, rest = joints[first + 1].s_mm - s_mm;
  if (rest <= snap_mm && rest <= into) {
    ++first;
  } else if (into > snap_mm) {
    const auto [a, b] = halves(course.pieces[first], into / length_of_piece(course.pieces[first]));
    if (has_length(a) && has_length(b)) {
      course.pieces[first] = a;
      ++first;
      course.pieces.insert(course.pieces.begin() + static_cast<std::ptrdiff_t>(first), b);
    }
  }
  joints = joints_of(course);
  const Joint start = joints[first];
  if (!course.closed && length - start.s_mm < shortest_rest_mm)
    return Error{"course", "", "too little of the course would be left"};
  const auto cut = course.pieces.begin() + static_cast<std::ptrdiff_t>(first);
  if (course.closed && start.s_mm < length) {
    std::rotate(course.pieces.begin(), cut, course.pieces.end());
    const std::size_t seam = course.pieces.size() - first;  // the old first piece
    if (first > 0 && seam > 0 && joined(course.pieces[seam - 1], course.pieces[seam]))
      course.pieces.erase(course.pieces.begin() + static_cast<std::ptrdiff_t>(seam));
    course.gaps_mm = turn_gaps(scenario.course.gaps_mm, start.s_mm, length);
  } else if (!course.closed) {
    course.pieces.erase(course.pieces.begin(), cut);
    while (!course.pieces.empty() && !has_length(course.pieces.front()))
      course.pieces.erase(course.pieces.begin());
    course.gaps_mm = carry_gaps(scenario.course.gaps_mm, {{start.s_mm, 0.0}, {length, length - start.s_mm}});
  }
  course.start_mm = {tidy(start.at.x_mm, 0.01), tidy(start.at.y_mm, 0.01)};
  course.heading_deg = tidy(start.heading_deg - 360.0 * std::rint(start.heading_deg / 360.0), 1e-4);
  return out;
}

void reverse_pieces(Course& course) {
  const Joint end = course.closed ? joints_of(course).front() : joints_of(course).back();
  std::reverse(course.pieces.begin(), course.pieces.end());
  for (Piece& piece : course.pieces)
    if (piece.turn_deg) piece.turn_deg = -*piece.turn_deg;
  course.start_mm = {tidy(end.at.x_mm, 0.01), tidy(end.at.y_mm, 0.01)};
  const double heading = end.heading_deg + 180.0;
  course.heading_deg = tidy(heading - 360.0 * std::rint(heading / 360.0), 1e-4);
}

void reverse_points(Course& course) {
  const int count = static_cast<int>(course.points_mm.size());
  std::reverse(course.points_mm.begin() + (course.closed && count > 0 ? 1 : 0), course.points_mm.end());
  for (int& corner : course.corners) corner = course.closed ? (count - corner) % count : count - 1 - corner;
  std::sort(course.corners.begin(), course.corners.end());
}

/// Where on a straight points are drawn: dense at its ends, where the curve has to go over into a bend, and
/// ever farther apart towards its middle.
std::vector<double> places_on_straight(double length) {
  std::vector<double> places{0.0};
  for (double step = joint_step_mm; places.back() + 1.5 * step < 0.5 * length; step *= 2.0)
    places.push_back(places.back() + step);
  for (std::size_t i = places.size() - 1; i > 0; --i) places.push_back(length - places[i]);
  return places;
}

/// Drawn points along one piece, its beginning but not its end.
void add_points_of(const Piece& piece, double s_mm, const Centreline& line, std::vector<Point>& points) {
  const double length = length_of_piece(piece);
  std::vector<double> places;
  if (piece.straight_mm) {
    places = places_on_straight(length);
  } else {
    const double parts = std::ceil(std::fabs(*piece.turn_deg) / bend_step_deg);
    for (double i = 0; i < parts; ++i) places.push_back(length * i / parts);
  }
  for (const double place : places) points.push_back(tidy_point(point_at(line, 1e-3 * (s_mm + place))));
}

}  // namespace

Result<Scenario> with_closed(const Scenario& scenario, bool closed, double radius_mm) {
  if (closed && !scenario.course.pieces.empty()) return with_pieces_closed(scenario, radius_mm);
  if (closed && scenario.course.points_mm.size() < 3)
    return Error{"course.points_mm", "", "a closed course needs three points at least"};
  Scenario out = scenario;
  out.course.closed = closed;
  const int last = static_cast<int>(out.course.points_mm.size()) - 1;
  // The ends of an open line have no other side to be a corner with.
  if (!closed) std::erase_if(out.course.corners, [last](int c) { return c == 0 || c == last; });
  if (scenario.course.points_mm.empty() || scenario.course.gaps_mm.empty()) return out;
  carry_point_gaps(out.course, scenario.course, {});
  return out;
}

Result<Scenario> with_start_at(const Scenario& scenario, const Centreline& line, double s_mm,
                               double snap_mm) {
  const double length = 1e3 * line.length;
  if (!(length > 0.0)) return Error{"course", "", "a course of no length has no start"};
  if (scenario.course.closed) s_mm -= length * std::floor(s_mm / length);
  s_mm = std::clamp(s_mm, 0.0, length);
  if (!scenario.course.closed && length - s_mm < shortest_rest_mm)
    return Error{"course", "", "too little of the course would be left"};
  if (scenario.course.pieces.empty()) return points_started_at(scenario, line, s_mm, snap_mm);
  return pieces_started_at(scenario, s_mm, snap_mm);
}

Scenario with_direction_reversed(const Scenario& scenario, const Centreline& line) {
  Scenario out = scenario;
  Course& course = out.course;
  if (course.pieces.empty())
    reverse_points(course);
  else
    reverse_pieces(course);
  const double length = 1e3 * line.length;
  for (Stretch& gap : course.gaps_mm)
    gap = {std::max(tidy(length - gap.to_mm, 0.1), 0.0), tidy(length - gap.from_mm, 0.1)};
  std::reverse(course.gaps_mm.begin(), course.gaps_mm.end());
  return out;
}

Scenario with_line_width(const Scenario& scenario, double width_mm) {
  Scenario out = scenario;
  each_course_field(out.course, [&](const FieldInfo& info, auto& value) {
    if constexpr (std::is_same_v<std::remove_cvref_t<decltype(value)>, double>) {
      if (info.key == "line_mm") value = std::clamp(tidy(width_mm, 0.5), info.range.low, info.range.high);
    }
  });
  return out;
}

Scenario with_course_shifted(const Scenario& scenario, double dx_mm, double dy_mm) {
  Scenario out = scenario;
  const auto shift = [&](Point& p) { p = {tidy(p.x_mm + dx_mm, 0.1), tidy(p.y_mm + dy_mm, 0.1)}; };
  for (Point& p : out.course.points_mm) shift(p);
  if (!out.course.pieces.empty()) shift(out.course.start_mm);
  return out;
}

Result<Scenario> with_points_from_pieces(const Scenario& scenario, const Centreline& line) {
  if (scenario.course.pieces.empty()) return Error{"course", "", "this course is drawn already"};
  Scenario out = scenario;
  Course& course = out.course;
  const std::vector<Joint> joints = joints_of(course);
  for (std::size_t i = 0; i < course.pieces.size(); ++i) {
    const Piece& piece = course.pieces[i];
    if (has_length(piece))
      add_points_of(piece, joints[i].s_mm, line, course.points_mm);
    else
      course.corners.push_back(static_cast<int>(course.points_mm.size()));
  }
  if (!course.closed) course.points_mm.push_back(tidy_point(point_at(line, line.length)));
  if (course.points_mm.size() > most_points) return Error{"course.points_mm", "", "too many points"};
  // A corner as the last piece of a closed course is a corner at its first point.
  for (int& corner : course.corners) corner %= static_cast<int>(course.points_mm.size());
  std::sort(course.corners.begin(), course.corners.end());
  course.pieces.clear();
  course.start_mm = {};
  course.heading_deg = 0.0;
  const double length = 1e3 * line.length;
  course.gaps_mm = carry_gaps(course.gaps_mm, {{0.0, 0.0}, {length, length}});
  return out;
}

}  // namespace lw::view
