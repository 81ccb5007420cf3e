// Edits of a course of exact pieces: straights, bends and sharp corners laid end to end.
//
// Adding or removing a piece moves everything after it, so a closed course is opened by it, and
// with_pieces_closed() leads the end back to the start by the shortest way that a bend of a given radius
// allows. Errors: a course of drawn points, an index outside the pieces, values outside their ranges,
// removing the last piece.
#pragma once

#include <cstddef>
#include <vector>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw::view {

/// Where one piece ends and the next begins.
struct Joint {
  Point at;                // mm
  double heading_deg = 0;  // along the course; at a corner: before it
  double s_mm = 0;         // arc length
};

/// The beginning of every piece and the end of the last: pieces + 1 joints.
std::vector<Joint> joints_of(const Course& course);

Piece straight_of(double length_mm);
Piece bend_of(double radius_mm, double turn_deg);  // radius 0: a corner
double length_of_piece(const Piece& piece);        // mm

/// A piece put before number `index`; `index` = number of pieces lays it at the end. Opens a closed course.
Result<Scenario> with_piece_inserted(const Scenario& scenario, std::size_t index, Piece piece);

/// Another length, radius or turn. A closed course stays closed by the others giving way (keep_closed.h);
/// where they cannot, it is opened.
Result<Scenario> with_piece_changed(const Scenario& scenario, std::size_t index, Piece piece);

/// Opens a closed course.
Result<Scenario> with_piece_removed(const Scenario& scenario, std::size_t index);

/// Another place in the order. A closed course that does not close any more is opened.
Result<Scenario> with_piece_moved(const Scenario& scenario, std::size_t from, std::size_t to);

/// A new course of one straight from the start of the old one (of its first point, when it is drawn).
Scenario with_pieces_begun(const Scenario& scenario, double length_mm);

/// Closed: as it is when the end meets the start, otherwise with bends of `radius_mm` and straights that lead
/// back, by the shortest of the paths "bend, straight, bend" (L. E. Dubins, On curves of minimal length with
/// a constraint on average curvature, American Journal of Mathematics 79, 1957). Errors: no such path, as
/// when start and end are nearer than the bends allow.
Result<Scenario> with_pieces_closed(const Scenario& scenario, double radius_mm);

/// The length that makes straight `index` end nearest to a point, held to `shortest_mm` or more.
double straight_towards(const Course& course, std::size_t index, Point p, double shortest_mm);

/// The turn, degrees, that makes bend `index` end in the direction of a point seen from its middle; the turn
/// keeps its side and stays within 5 to 355 degrees.
double turn_towards(const Course& course, std::size_t index, Point p);

/// The middle of a bend's circle, mm.
Point middle_of_bend(const Course& course, std::size_t index);

}  // namespace lw::view
