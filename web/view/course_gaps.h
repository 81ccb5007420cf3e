// Gaps of the line: edits by arc length, and how gaps follow when the line itself is changed.
//
// A gap is a stretch of arc length, so every change of the course moves it. carry_gaps() keeps it between the
// same two marks of the line (drawn points, ends of pieces) at the same share of the way. `length` is the
// centreline's, mm. Gaps stay sorted and apart: those that touch become one.
#pragma once

#include <vector>

#include "engine/course/centreline.h"
#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw::view {

inline constexpr double shortest_gap_mm = 1.0;

/// A new gap from one place to another, joined to the gaps it touches. On a closed course from > to runs
/// through the start and is held as two gaps; on an open one the two are put in order. Errors: a gap of the
/// whole course, or one shorter than shortest_gap_mm.
Result<Scenario> with_gap(const Scenario& scenario, double from_mm, double to_mm, double length_mm);

Result<Scenario> with_gap_removed(const Scenario& scenario, std::size_t index);

/// One end of a gap put elsewhere: not beyond its other end nor into its neighbours. Errors: no such gap.
Result<Scenario> with_gap_end(const Scenario& scenario, std::size_t index, bool far_end, double to_mm,
                              double length_mm);

/// The gap at a place, or -1; `slack_mm` to either side counts as well.
int gap_at(const Course& course, double s_mm, double slack_mm);

/// Arc length, mm, of every mark of a course: of each drawn point, or of each piece's beginning. Empty when
/// they cannot be told (a course that is not this centreline's).
std::vector<double> marks_of(const Course& course, const Centreline& line);

/// One place of the line before and after an edit, mm of arc length; both increase from pair to pair.
struct Moved {
  double before = 0, after = 0;
};

/// Gaps after an edit that took the line's places from `before` to `after`, piecewise evenly in between; what
/// falls outside the new line or shrinks to nothing is dropped. Unchanged when fewer than two pairs are
/// given.
std::vector<Stretch> carry_gaps(const std::vector<Stretch>& gaps, const std::vector<Moved>& moved);

/// Gives `after` the gaps of `before`, a course of drawn points from which it was edited. index_after[i] is
/// the number that point i has now, -1 when it is gone; empty when all kept theirs. Gaps stay as they are
/// when either course has no centreline.
void carry_point_gaps(Course& after, const Course& before, const std::vector<int>& index_after);

/// Gaps after the beginning of a closed line of `length_mm` has moved on by `by_mm`.
std::vector<Stretch> turn_gaps(const std::vector<Stretch>& gaps, double by_mm, double length_mm);

}  // namespace lw::view
