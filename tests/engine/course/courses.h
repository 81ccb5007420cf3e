// What the tests of courses build on.
#pragma once

#include <string>
#include <vector>

#include "engine/scenario/scenario.h"

namespace lw::test {

inline Piece straight(double mm) {
  Piece piece;
  piece.straight_mm = mm;
  return piece;
}
inline Piece bend(double radius_mm, double turn_deg) {
  Piece piece;
  piece.radius_mm = radius_mm;
  piece.turn_deg = turn_deg;
  return piece;
}
inline Course course_of(std::vector<Piece> pieces, bool closed = true, double heading_deg = 0.0) {
  Course course;
  course.pieces = pieces;
  course.closed = closed;
  course.heading_deg = heading_deg;
  return course;
}
inline bool holds(const std::string& text, const std::string& part) {
  return text.find(part) != std::string::npos;
}

}  // namespace lw::test
