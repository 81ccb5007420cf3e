#include "engine/course/sampling.h"

#include <algorithm>
#include <cmath>

#include "engine/numeric/words.h"

namespace lw {

std::string rounded_text(double value) { return significant(value, 6); }

std::string place_text(const char* list, std::size_t index) {
  return std::string(list) + "[" + std::to_string(index) + "]";
}

Result<Centreline> blank_centreline(double length, bool closed) {
  const std::string what = "the course is " + rounded_text(length * 1e3) + " mm long";
  if (!(length >= course_length_least)) return Error{"course", what, "it must be at least 10 mm long"};
  if (!(length <= course_length_most)) return Error{"course", what, "it must be at most 1 km long"};
  const double steps = std::ceil(length / std::max(pitch_aim, length / (nodes_most - 1.0)));
  Centreline line;
  line.closed = closed;
  line.length = length;
  line.pitch = length / steps;
  line.nodes.resize(static_cast<std::size_t>(steps) + (closed ? 0 : 1));
  return line;
}

}  // namespace lw
