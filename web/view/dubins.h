// The shortest way from one place and heading to another with bends of one radius: bend, straight, bend.
//
// L. E. Dubins, On curves of minimal length with a constraint on average curvature, American Journal of
// Mathematics 79 (1957): the shortest such path is a bend, a straight and a bend, or three bends. Three bends
// are shorter only when the places are nearer than four radii, and then make for a line that nobody lays;
// they are left out.
#pragma once

#include <vector>

#include "web/view/course_pieces.h"

namespace lw::view {

/// The pieces of the way, those of no length left out; empty when there is none. Lengths mm, headings
/// degrees.
std::vector<Piece> shortest_way(const Joint& from, const Joint& to, double radius_mm);

}  // namespace lw::view
