// Keeping a closed course of pieces closed while one of its pieces changes.
//
// With all turns held, the vector from start to end is linear in the lengths of straights and the radii of
// bends. So after one length or radius has changed, the others are changed as little as closes the course
// again, counted as shares of themselves: with weights w_i = v_i^2, the changes are w_i a_i . (A W A^T)^-1 r
// (least norm under two linear conditions), r being what is missing and a_i the end's move per unit of v_i.
#pragma once

#include <cstddef>
#include <optional>

#include "engine/scenario/scenario.h"

namespace lw::view {

/// `course` closed by changing all pieces but `index`; nothing when the headings do not agree, or when a
/// length or radius would have to fall below a fifth of what it was. Results are rounded to 0.01 mm.
std::optional<Course> kept_closed(Course course, std::size_t index);

}  // namespace lw::view
