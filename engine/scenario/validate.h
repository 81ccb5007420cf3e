// Whether a scenario can be driven at all.
//
// First every field against its range (fields.h), then the rules that tie fields together:
//   sensors     edge takes 1 sensor, pair 2, bar 3 to 16, at different offsets; gain and offset_pct one a
//   sensor or left
//               out; white at least 1 point above black
//   course      pieces or drawn points, one of them, not both; a piece is a straight or a bend; 2 points for
//   an open
//               course, 3 for a closed one; corners are different indices of points; a gap ends after it
//               begins
//   floor       a light gradient has two entries
//   drive       at most 5 million loops (time limit / period)
//   stress      a spread names a number of the scenario (numbers.h), each at most once
// What needs the finished centreline (does it close, is a gap on it) is checked in engine/course.
#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "engine/numeric/result.h"
#include "engine/scenario/fields.h"

namespace lw {

inline constexpr double most_loops = 5e6;
inline constexpr double least_contrast_pct = 1.0;
inline constexpr double least_magnitude =
    1e-300;  // of a number other than 0: keeps products away from underflow

/// A rule broken, and by which field, so that a reader of text can find its line.
struct Fault {
  std::string section;  // "sensors"; "" at the top level
  std::string key;      // "gain"
  int entry = -1;       // index into the list the key holds, or -1
  std::string path;     // as shown: "sensors.gain[1]", "course.pieces[2].turn_deg"
  std::string value;    // as shown
  std::string rule;     // "between 0 and 100"
};

/// "where: path = value: rule".
Error error_of(const Fault& fault, std::string where = "");

/// Like "between 10 and 5000 mm" or "above 0 and at most 60 s".
std::string range_text(const FieldInfo& info);

/// The first fault in the order of the text; nothing for a valid scenario.
std::optional<Fault> find_fault(const Scenario& scenario);

/// The first fault of the one field at `path` alone, as --set needs it before all fields are set.
std::optional<Fault> find_fault_in(const Scenario& scenario, std::string_view path);

/// find_fault() as an error without a file name.
std::optional<Error> validate(const Scenario& scenario);

}  // namespace lw
