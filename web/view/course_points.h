// Edits of a course of drawn points, each a function from a scenario to the scenario after it.
//
// None of them asks whether the new course can be driven: the desk does that for every edit alike and says
// why not. They keep together what belongs together: corners follow their points, and gaps stay between the
// same two points of the line although arc lengths change. Points are rounded to 0.1 mm, finer than anyone
// draws, so that texts and links stay short.
//
// Errors: a course of exact pieces (course_whole.h turns one into points), an index outside the points, too
// few points left, more points than a scenario holds.
#pragma once

#include <cstddef>
#include <span>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw::view {

Result<Scenario> with_point_moved(const Scenario& scenario, std::size_t index, Point to);

/// A new point between `index` - 1 and `index`; `index` = number of points adds it at the end.
Result<Scenario> with_point_inserted(const Scenario& scenario, std::size_t index, Point at);

/// Never fewer than two points of an open course, three of a closed one.
Result<Scenario> with_point_deleted(const Scenario& scenario, std::size_t index);

/// Sharp or smooth. The ends of an open course are neither: an error.
Result<Scenario> with_corner(const Scenario& scenario, std::size_t index, bool sharp);

bool is_corner(const Course& course, std::size_t index);

/// The course drawn anew by a freehand stroke (mm, in the order drawn): few points, closed when it comes back
/// to its beginning, corners where the hand turned sharply; gaps are gone. `coarse` is the distance in mm
/// that counts as the hand's trembling at the scale of the screen. Errors: those of engine/course/stroke.h.
Result<Scenario> with_stroke(const Scenario& scenario, std::span<const Point> stroke, double coarse);

/// An open course carried on from its last point by a stroke that begins there.
Result<Scenario> with_stroke_appended(const Scenario& scenario, std::span<const Point> stroke, double coarse);

}  // namespace lw::view
