// Edits of a course as a whole, drawn or made of pieces: closed or open, where it starts, which way it runs,
// width.
//
// `line` is the centreline of the scenario's course. Arc lengths in mm.
#pragma once

#include "engine/course/centreline.h"
#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw::view {

/// Closed or open. Pieces that do not meet are led back to the start with bends of `radius_mm`
/// (course_pieces.h); drawn points need three to close.
Result<Scenario> with_closed(const Scenario& scenario, bool closed, double radius_mm);

/// The drive begins at `s_mm`. A closed course begins there and loses nothing; of an open one, what lies
/// before is cut off. A drawn point is put there unless one is as near as `snap_mm`; a piece is cut in two,
/// unless it begins or ends as near as that. Errors: a course of no length, or less than 10 mm of an open one
/// left.
Result<Scenario> with_start_at(const Scenario& scenario, const Centreline& line, double s_mm, double snap_mm);

/// The other way round: a closed course from the same start, an open one from its end.
Scenario with_direction_reversed(const Scenario& scenario, const Centreline& line);

/// Held to the range of the field.
Scenario with_line_width(const Scenario& scenario, double width_mm);

/// The whole course put elsewhere.
Scenario with_course_shifted(const Scenario& scenario, double dx_mm, double dy_mm);

/// A course of pieces as drawn points that follow it within a millimetre; corners stay sharp. Errors: a
/// course that is drawn already, too many points.
Result<Scenario> with_points_from_pieces(const Scenario& scenario, const Centreline& line);

}  // namespace lw::view
