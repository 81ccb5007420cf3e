// The line as it lies on the floor, as few points as the eye needs.
//
// The tape is the centreline widened to both sides: cut square at gaps and open ends, rounded on the outside
// of a corner, as in engine/course/floor.h. Points are dropped while the chord stays within a tolerance of
// the curve: a chord of length c that turns by the angle a leaves the arc by about a c / 8.
#pragma once

#include <string>
#include <vector>

#include "engine/course/centreline.h"

namespace lw::view {

/// A piece of tape without gap or corner inside it; m.
using Strip = std::vector<CoursePoint>;

struct LineShape {
  std::vector<Strip> strips;
  Strip corners;  // where a round has to be laid
};

/// `tolerance` in m.
LineShape shape_of(const Centreline& line, double tolerance);

/// The course between two arc lengths (m) as one strip, gaps or not. Corners inside become two points at one
/// place.
Strip strip_between(const Centreline& line, double from, double to, double tolerance);

/// 1, 2 or 5 times a power of ten, the least that is not below `at_least` (> 0).
double round_step(double at_least);

/// "50 mm", "20 cm", "1 m", "2 km": for round lengths.
std::string length_text(double mm);

}  // namespace lw::view
