// Exact pieces: chosen on the floor, changed by the handle at their end and, for bends, the one at their
// middle.
#include <algorithm>
#include <cmath>
#include <numbers>

#include "web/view/bench.h"
#include "web/view/course_pieces.h"
#include "web/view/tidy.h"

namespace lw::view {
namespace {

constexpr double per_degree = std::numbers::pi / 180.0;
constexpr double shortest_mm = 10.0, tightest_mm = 10.0;

bool is_bend(const Piece& piece) { return piece.radius_mm && *piece.radius_mm > 0; }

/// Whole degrees, drawn to the angles that courses are built of.
double tidy_turn(double turn) {
  const double round = 15.0 * std::rint(turn / 15.0);
  return std::fabs(turn - round) < 3.0 ? round : std::rint(turn);
}

/// The middle of a bend's arc from its beginning, for a radius of 1.
Point middle_per_radius(const Joint& from, double turn_deg) {
  const double then = from.heading_deg * per_degree, now = then + 0.5 * turn_deg * per_degree;
  const double side = turn_deg > 0 ? 1.0 : -1.0;
  return {side * (std::sin(now) - std::sin(then)), side * (std::cos(then) - std::cos(now))};
}

Point middle_of_arc(const Course& course, std::size_t index) {
  const Joint from = joints_of(course)[index];
  const Piece& piece = course.pieces[index];
  const Point u = middle_per_radius(from, *piece.turn_deg);
  return {from.at.x_mm + *piece.radius_mm * u.x_mm, from.at.y_mm + *piece.radius_mm * u.y_mm};
}

/// The piece as the hand at `p` wants it, its end (or the middle of its arc) being held.
Piece reshaped(const Course& course, std::size_t index, Point p, bool middle) {
  const Piece& piece = course.pieces[index];
  const Joint from = joints_of(course)[index];
  if (piece.straight_mm)
    return straight_of(std::max(tidy(straight_towards(course, index, p, shortest_mm), 5.0), 5.0));
  if (middle) {
    const Point u = middle_per_radius(from, *piece.turn_deg);
    const double along = (p.x_mm - from.at.x_mm) * u.x_mm + (p.y_mm - from.at.y_mm) * u.y_mm;
    const double radius = along / (u.x_mm * u.x_mm + u.y_mm * u.y_mm);
    return bend_of(std::max(tidy(radius, 5.0), tightest_mm), *piece.turn_deg);
  }
  if (is_bend(piece)) return bend_of(*piece.radius_mm, tidy_turn(turn_towards(course, index, p)));
  double turn = std::atan2(p.y_mm - from.at.y_mm, p.x_mm - from.at.x_mm) / per_degree - from.heading_deg;
  turn -= 360.0 * std::rint(turn / 360.0);
  turn = std::clamp(tidy_turn(turn), -170.0, 170.0);
  return bend_of(0.0, turn == 0.0 ? 1.0 : turn);
}

/// Where the handle of a piece's end is drawn: a corner's lies ahead, in the direction it turns to.
Pixel end_handle(const Bench& bench, std::size_t index) {
  const Joint to = joints_of(bench.course())[index + 1];
  Pixel at = screen_of(bench, to.at);
  if (length_of_piece(bench.course().pieces[index]) > 0) return at;
  const float arm = 3.0f * bench.pointer.reach;
  at.x += arm * static_cast<float>(std::cos(to.heading_deg * per_degree));
  at.y -= arm * static_cast<float>(std::sin(to.heading_deg * per_degree));
  return at;
}

int piece_at(const Bench& bench, double s_mm) {
  const auto& marks = bench.floor.marks;
  const auto next = std::upper_bound(marks.begin(), marks.end(), s_mm);
  return static_cast<int>(next - marks.begin()) - 1;
}

void draw_pieces(const Bench& bench, int chosen) {
  const std::vector<Joint> joints = joints_of(bench.course());
  for (const Joint& joint : joints) {
    const double normal = joint.heading_deg * per_degree;
    const float half =
        std::max(6.0f, static_cast<float>(0.5 * bench.course().line_mm * bench.floor.view.scale) + 3);
    const auto nx = half * static_cast<float>(std::sin(normal)),
               ny = half * static_cast<float>(std::cos(normal));
    const Pixel at = screen_of(bench, joint.at);
    bench.draw.AddLine({at.x - nx, at.y - ny}, {at.x + nx, at.y + ny}, bench.theme.text, 2.0f);
  }
  if (chosen < 0 || static_cast<std::size_t>(chosen) >= bench.course().pieces.size()) return;
  const auto index = static_cast<std::size_t>(chosen);
  if (bench.in_step() && length_of_piece(bench.course().pieces[index]) > 0)
    draw_along(bench, 1e-3 * joints[index].s_mm, 1e-3 * joints[index + 1].s_mm, bench.theme.accent, 3.0f);
  const Pixel end = end_handle(bench, index), joint = screen_of(bench, joints[index + 1].at);
  bench.draw.AddLine(vec(joint), vec(end), bench.theme.accent, 2.0f);
  if (is_bend(bench.course().pieces[index]))
    draw_spot(bench, screen_of(bench, middle_of_arc(bench.course(), index)), false, true);
  draw_spot(bench, end, true, false);
}

Grip handle_under(const Bench& bench, int chosen) {
  if (chosen < 0 || static_cast<std::size_t>(chosen) >= bench.course().pieces.size()) return Grip::nothing;
  const auto index = static_cast<std::size_t>(chosen);
  const float near = 1.5f * bench.pointer.reach;
  if (distance(bench.pointer.at, end_handle(bench, index)) < near) return Grip::piece_end;
  if (!is_bend(bench.course().pieces[index])) return Grip::nothing;
  const Pixel middle = screen_of(bench, middle_of_arc(bench.course(), index));
  return distance(bench.pointer.at, middle) < near ? Grip::piece_middle : Grip::nothing;
}

}  // namespace

void work_pieces(Bench& bench) {
  panel::Desk& desk = bench.desk;
  Held& held = bench.floor.held;
  const Pointer& hand = bench.pointer;
  int& chosen = desk.selection.piece;
  const Grip handle = bench.idle() && hand.over ? handle_under(bench, chosen) : Grip::nothing;
  std::optional<double> place;
  if (bench.idle() && hand.over && handle == Grip::nothing && bench.in_step())
    place = line_under(bench, hand.at);
  if (hand.pressed && bench.idle()) {
    if (handle != Grip::nothing) {
      take(bench, handle, chosen);
    } else {
      chosen = place ? piece_at(bench, 1e3 * *place) : -1;
      grip_floor(bench);
    }
  }
  const bool shaping = held.grip == Grip::piece_end || held.grip == Grip::piece_middle;
  if (shaping && hand.held && moving(bench)) {
    const auto index = static_cast<std::size_t>(held.index);
    const Piece piece = reshaped(held.base.course, index, to_floor(bench.floor.view, hand.at),
                                 held.grip == Grip::piece_middle);
    attempt(bench, with_piece_changed(held.base, index, piece));
  }
  if (bench.idle() && hand.remove && chosen >= 0) {
    const auto index = static_cast<std::size_t>(chosen);
    if (edit_at_once(bench, with_piece_removed(desk.scenario, index))) chosen = -1;
  }
  draw_pieces(bench, chosen);
  if (handle != Grip::nothing || place) ImGui::SetMouseCursor(ImGuiMouseCursor_Hand);
}

}  // namespace lw::view
