#include "web/view/course_pieces.h"

#include <algorithm>
#include <cmath>
#include <numbers>
#include <optional>

#include "engine/scenario/fields.h"
#include "web/view/course_gaps.h"
#include "web/view/dubins.h"
#include "web/view/keep_closed.h"
#include "web/view/tidy.h"

namespace lw::view {
namespace {

constexpr double per_degree = std::numbers::pi / 180.0;

Error wrong_kind() {
  return {"course", "drawn points", "this course is drawn, not made of exact pieces: begin one with pieces"};
}
Error no_piece(std::size_t index) {
  return {"course.pieces[" + std::to_string(index) + "]", "", "there is no such piece"};
}

std::optional<Error> out_of_range(const Piece& piece) {
  std::optional<Error> error;
  Piece copy = piece;
  each_piece_field(copy, [&](const FieldInfo& info, std::optional<double>& value) {
    if (value && !info.range.holds(*value) && !error)
      error = Error{std::string(info.label), "", std::string(info.meaning)};
  });
  const bool straight = piece.straight_mm && !piece.radius_mm && !piece.turn_deg;
  const bool bend = !piece.straight_mm && piece.radius_mm && piece.turn_deg;
  if (!error && !straight && !bend) error = Error{"course.pieces", "", "a piece is a straight or a bend"};
  return error;
}

Joint after(const Joint& from, const Piece& piece) {
  Joint to = from;
  to.s_mm += length_of_piece(piece);
  const double before = from.heading_deg * per_degree;
  if (piece.straight_mm) {
    to.at.x_mm += *piece.straight_mm * std::cos(before);
    to.at.y_mm += *piece.straight_mm * std::sin(before);
    return to;
  }
  const double turn = piece.turn_deg.value_or(0.0), radius = piece.radius_mm.value_or(0.0);
  to.heading_deg += turn;
  const double now = to.heading_deg * per_degree, signed_radius = turn > 0 ? radius : -radius;
  to.at.x_mm += signed_radius * (std::sin(now) - std::sin(before));
  to.at.y_mm += signed_radius * (std::cos(before) - std::cos(now));
  return to;
}

/// The same gaps on the pieces after an edit: a piece's end at a list index goes to that of another list.
void carry(Scenario& out, const Course& before, const std::vector<std::size_t>& kept_before,
           const std::vector<std::size_t>& kept_after) {
  if (out.course.gaps_mm.empty()) return;
  const std::vector<Joint> then = joints_of(before), now = joints_of(out.course);
  std::vector<Moved> moved;
  for (std::size_t i = 0; i < kept_before.size(); ++i)
    moved.push_back({then[kept_before[i]].s_mm, now[kept_after[i]].s_mm});
  out.course.gaps_mm = carry_gaps(before.gaps_mm, moved);
}

}  // namespace

std::vector<Joint> joints_of(const Course& course) {
  std::vector<Joint> joints{{course.start_mm, course.heading_deg, 0.0}};
  for (const Piece& piece : course.pieces) joints.push_back(after(joints.back(), piece));
  return joints;
}

Piece straight_of(double length_mm) { return {length_mm, {}, {}}; }
Piece bend_of(double radius_mm, double turn_deg) { return {{}, radius_mm, turn_deg}; }

double length_of_piece(const Piece& piece) {
  if (piece.straight_mm) return *piece.straight_mm;
  return piece.radius_mm.value_or(0.0) * std::fabs(piece.turn_deg.value_or(0.0)) * per_degree;
}

Result<Scenario> with_piece_inserted(const Scenario& scenario, std::size_t index, Piece piece) {
  const Course& before = scenario.course;
  if (before.pieces.empty()) return wrong_kind();
  if (index > before.pieces.size()) return no_piece(index);
  if (before.pieces.size() >= most_pieces) return Error{"course.pieces", "", "the course is full"};
  if (const std::optional<Error> error = out_of_range(piece)) return *error;
  Scenario out = scenario;
  out.course.closed = false;
  out.course.pieces.insert(out.course.pieces.begin() + static_cast<std::ptrdiff_t>(index), piece);
  std::vector<std::size_t> kept, now;
  for (std::size_t i = 0; i <= before.pieces.size(); ++i) {
    kept.push_back(i);
    now.push_back(i > index ? i + 1 : i);
  }
  carry(out, before, kept, now);
  return out;
}

Result<Scenario> with_piece_changed(const Scenario& scenario, std::size_t index, Piece piece) {
  const Course& before = scenario.course;
  if (before.pieces.empty()) return wrong_kind();
  if (index >= before.pieces.size()) return no_piece(index);
  if (const std::optional<Error> error = out_of_range(piece)) return *error;
  Scenario out = scenario;
  out.course.pieces[index] = piece;
  if (before.closed) {
    const std::optional<Course> closed = kept_closed(out.course, index);
    if (closed) out.course = *closed;
    out.course.closed = closed.has_value();
  }
  std::vector<std::size_t> kept;
  for (std::size_t i = 0; i <= before.pieces.size(); ++i) kept.push_back(i);
  carry(out, before, kept, kept);
  return out;
}

Result<Scenario> with_piece_removed(const Scenario& scenario, std::size_t index) {
  const Course& before = scenario.course;
  if (before.pieces.empty()) return wrong_kind();
  if (index >= before.pieces.size()) return no_piece(index);
  if (before.pieces.size() == 1) return Error{"course.pieces", "", "a course needs one piece at least"};
  Scenario out = scenario;
  out.course.closed = false;
  out.course.pieces.erase(out.course.pieces.begin() + static_cast<std::ptrdiff_t>(index));
  std::vector<std::size_t> kept, now;
  for (std::size_t i = 0; i <= before.pieces.size(); ++i) {
    kept.push_back(i);
    now.push_back(i > index ? i - 1 : i);
  }
  carry(out, before, kept, now);
  return out;
}

Result<Scenario> with_piece_moved(const Scenario& scenario, std::size_t from, std::size_t to) {
  const Course& before = scenario.course;
  if (before.pieces.empty()) return wrong_kind();
  const std::size_t count = before.pieces.size();
  if (from >= count || to >= count) return no_piece(from >= count ? from : to);
  Scenario out = scenario;
  auto& pieces = out.course.pieces;
  const auto at = [&](std::size_t i) { return pieces.begin() + static_cast<std::ptrdiff_t>(i); };
  if (from < to) std::rotate(at(from), at(from + 1), at(to + 1));
  if (to < from) std::rotate(at(to), at(from), at(from + 1));
  // Turns and lengths are the same in another order, yet only a symmetric course still closes.
  if (before.closed && from != to) {
    const Joint end = joints_of(out.course).back();
    const double gap = std::hypot(end.at.x_mm - before.start_mm.x_mm, end.at.y_mm - before.start_mm.y_mm);
    out.course.closed = gap < 0.5;
  }
  return out;
}

Scenario with_pieces_begun(const Scenario& scenario, double length_mm) {
  Scenario out = scenario;
  Course& course = out.course;
  if (!course.points_mm.empty()) {
    course.start_mm = course.points_mm.front();
    course.heading_deg = 0.0;
    if (course.points_mm.size() > 1) {
      const Point a = course.points_mm[0], b = course.points_mm[1];
      course.heading_deg = tidy(std::atan2(b.y_mm - a.y_mm, b.x_mm - a.x_mm) / per_degree, 1.0);
    }
  }
  course.points_mm.clear();
  course.corners.clear();
  course.gaps_mm.clear();
  course.pieces = {straight_of(length_mm)};
  course.closed = false;
  return out;
}

Result<Scenario> with_pieces_closed(const Scenario& scenario, double radius_mm) {
  if (scenario.course.pieces.empty()) return wrong_kind();
  if (!(radius_mm >= 1.0)) return Error{"radius", "", "the way back needs bends of 1 mm radius or more"};
  Scenario out = scenario;
  Course& course = out.course;
  course.closed = true;
  const std::vector<Joint> joints = joints_of(course);
  const Joint start = joints.front(), end = joints.back();
  const double turned = end.heading_deg - start.heading_deg;
  const double twist = turned - 360.0 * std::rint(turned / 360.0);
  const double gap = std::hypot(end.at.x_mm - start.at.x_mm, end.at.y_mm - start.at.y_mm);
  if (gap < 0.5 && std::fabs(twist) < 0.1) return out;
  const std::vector<Piece> back = shortest_way(end, start, radius_mm);
  if (back.empty())
    return Error{"course.pieces", "", "no way leads back to the start with bends of this radius"};
  course.pieces.insert(course.pieces.end(), back.begin(), back.end());
  return out;
}

double straight_towards(const Course& course, std::size_t index, Point p, double shortest_mm) {
  const Joint from = joints_of(course)[index];
  const double heading = from.heading_deg * per_degree;
  const double along =
      (p.x_mm - from.at.x_mm) * std::cos(heading) + (p.y_mm - from.at.y_mm) * std::sin(heading);
  return std::max(along, shortest_mm);
}

Point middle_of_bend(const Course& course, std::size_t index) {
  const Joint from = joints_of(course)[index];
  const Piece& piece = course.pieces[index];
  const double radius = piece.radius_mm.value_or(0.0) * (piece.turn_deg.value_or(0.0) > 0 ? 1 : -1);
  const double heading = from.heading_deg * per_degree;
  return {from.at.x_mm - radius * std::sin(heading), from.at.y_mm + radius * std::cos(heading)};
}

double turn_towards(const Course& course, std::size_t index, Point p) {
  const Joint from = joints_of(course)[index];
  const Point middle = middle_of_bend(course, index);
  const double then = std::atan2(from.at.y_mm - middle.y_mm, from.at.x_mm - middle.x_mm);
  const double now = std::atan2(p.y_mm - middle.y_mm, p.x_mm - middle.x_mm);
  const double side = course.pieces[index].turn_deg.value_or(0.0) > 0 ? 1.0 : -1.0;
  double turn = side * (now - then) / per_degree;
  turn -= 360.0 * std::floor(turn / 360.0);
  // Just short of the beginning means the hand went back past it, not once around.
  if (turn > 357.0) turn = 0.0;
  return side * std::clamp(turn, 5.0, 355.0);
}

}  // namespace lw::view
