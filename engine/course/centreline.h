// The centreline of a course: the curve down the middle of the line, by arc length.
//
// Pieces are laid end to end exactly; drawn points are joined by a curve with continuous curvature. Either is
// then sampled at one constant pitch of arc length, so that a place s is found by one multiplication. Between
// two samples the curve is the arc through the first with the curvature held there: exact on straights and
// bends, and within pitch^2 |curvature| / 8 at a joint inside a sample.
//
// Frame: metres, x right, y up; curvature positive in a left bend; the normal is the tangent turned left.
#pragma once

#include <cstddef>
#include <vector>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw {

/// One sample of the centreline.
struct Node {
  double x = 0.0, y = 0.0;                  // m
  double tangent_x = 1.0, tangent_y = 0.0;  // unit vector along the course
  double curvature = 0.0;                   // 1/m, left positive, held until the next sample
  double reach =
      0.0;  // m; a point nearer to the curve than this, around here, has no other foot point within the
            // tracking window (Federer 1959, Curvature measures: the reach of a set). 0 at a corner.
};

/// A stretch of the course as people speak of it: a straight, a bend of about one radius, or a corner.
struct CourseSection {
  double from = 0.0, to = 0.0;  // m of arc length; from == to for a corner
  double radius = 0.0;          // m; infinite for a straight, 0 for a corner
  double turn = 0.0;            // rad through the whole section, left positive
};

struct Centreline {
  bool closed = false;
  double length = 0.0;  // m
  double pitch = 0.0;   // m; length / nodes when closed, length / (nodes - 1) when open
  double window = 0.0;  // m; progress is looked for this far before and behind the last one
  std::vector<Node> nodes;
  std::vector<double> corners;          // m of arc length of every sharp corner
  std::vector<Stretch> gaps_mm;         // as in the scenario, checked against the length
  std::vector<CourseSection> sections;  // in order, covering the whole course
};

/// A point of the centreline.
struct CoursePoint {
  double x, y, tangent_x, tangent_y, curvature;
};

/// Builds the centreline. Errors: no course, both pieces and points, zero length, pieces that do not close
/// (says by how much), touching or repeated points, corner indices outside the points, gaps outside the
/// course.
Result<Centreline> make_centreline(const Course& course, double window_m);

/// The point at arc length s (m). Closed courses wrap; open ones run on straight beyond their ends.
CoursePoint point_at(const Centreline& line, double s);

/// The nearest place on the whole centreline to a point: its arc length, and the signed deviation (left
/// positive), m.
struct Foot {
  double s, deviation;
};
Foot nearest_foot(const Centreline& line, double x, double y);

}  // namespace lw
