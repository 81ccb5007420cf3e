#include "web/view/dubins.h"

#include <cmath>
#include <numbers>
#include <optional>

namespace lw::view {
namespace {

constexpr double per_degree = std::numbers::pi / 180.0;
constexpr double full_turn = 2.0 * std::numbers::pi;
constexpr double least_turn = 1e-9;  // rad: a rounding error, not a bend

/// Centre of the circle that a bend to `side` (+1 left) begins or ends on.
Point centre_of(const Joint& joint, double side, double radius) {
  const double heading = joint.heading_deg * per_degree;
  return {joint.at.x_mm - side * radius * std::sin(heading),
          joint.at.y_mm + side * radius * std::cos(heading)};
}

/// The angle turned to `side` from one heading to another, in [0, 2 pi).
double turned(double side, double from, double to) {
  double angle = side * (to - from);
  angle -= full_turn * std::floor(angle / full_turn);
  return angle > full_turn - least_turn ? 0.0 : angle;
}

struct Way {
  double first = 0, straight = 0, last = 0;  // rad, mm, rad
  double first_side = 1, last_side = 1;
  double length(double radius) const { return radius * (first + last) + straight; }
};

/// Bends to the same side: the straight runs beside the line of centres. To opposite sides: it crosses it,
/// touching both circles, which needs them two radii apart.
std::optional<Way> way(const Joint& from, const Joint& to, double first_side, double last_side,
                       double radius) {
  const Point a = centre_of(from, first_side, radius), b = centre_of(to, last_side, radius);
  const double apart = std::hypot(b.x_mm - a.x_mm, b.y_mm - a.y_mm);
  double heading = std::atan2(b.y_mm - a.y_mm, b.x_mm - a.x_mm);
  double straight = apart;
  if (first_side != last_side) {
    if (apart < 2.0 * radius) return {};
    straight = std::sqrt(apart * apart - 4.0 * radius * radius);
    heading += first_side * std::asin(2.0 * radius / apart);
  }
  const double start = from.heading_deg * per_degree, end = to.heading_deg * per_degree;
  Way found;
  found.first = turned(first_side, start, heading);
  found.straight = straight;
  found.last = turned(last_side, heading, end);
  found.first_side = first_side, found.last_side = last_side;
  return found;
}

}  // namespace

std::vector<Piece> shortest_way(const Joint& from, const Joint& to, double radius_mm) {
  std::optional<Way> best;
  for (const double first : {1.0, -1.0}) {
    for (const double last : {1.0, -1.0}) {
      const std::optional<Way> found = way(from, to, first, last, radius_mm);
      if (found && (!best || found->length(radius_mm) < best->length(radius_mm))) best = found;
    }
  }
  std::vector<Piece> pieces;
  if (!best) return pieces;
  if (best->first > least_turn)
    pieces.push_back(bend_of(radius_mm, best->first_side * best->first / per_degree));
  if (best->straight > 1e-6) pieces.push_back(straight_of(best->straight));
  if (best->last > least_turn)
    pieces.push_back(bend_of(radius_mm, best->last_side * best->last / per_degree));
  return pieces;
}

}  // namespace lw::view
