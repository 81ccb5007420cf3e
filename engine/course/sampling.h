// What pieces and drawn points have in common on their way to a centreline.
#pragma once

#include <string>

#include "engine/course/angles.h"
#include "engine/course/centreline.h"

namespace lw {

inline constexpr double pitch_aim = 1e-3;            // m between two samples
inline constexpr double nodes_most = 200000.0;       // longer courses are sampled more coarsely
inline constexpr double course_length_most = 1e3;    // m; the pitch is then 5 mm
inline constexpr double course_length_least = 0.01;  // m
inline constexpr double radius_least = 1e-3;         // m; also never below the pitch
inline constexpr double on_sample = 1e-6;            // samples; a joint this near to one lies on it

/// Length, pitch and an empty node for every sample. Errors: too short, too long.
Result<Centreline> blank_centreline(double length, bool closed);

/// A number as a message shows it, six significant digits at most.
std::string rounded_text(double value);

/// "course.pieces[3]": the third key of a list, counted from 0 as in the scenario text.
std::string place_text(const char* list, std::size_t index);

/// The course laid out of exact pieces, or drawn through points: nodes but for their reach, corners,
/// sections.
Result<Centreline> lay_pieces(const Course& course);
Result<Centreline> join_points(const Course& course);

/// Fills in Node::reach for every node; window in m as in Centreline.
void find_reach(Centreline& line);

/// Sections of a course whose curvature changes gradually: runs of nearly straight, and of bend by side and
/// tightness.
std::vector<CourseSection> sections_of(const Centreline& line);

}  // namespace lw
