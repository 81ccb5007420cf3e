// A scenario as text and back: TOML 1.0, one file a scenario, described by the fields of fields.h.
//
//   format = "linewright 1"
//   title = "Seedling cart, aisle loop"
//
//   [vehicle]
//   wheel_left_mm = 59.8
//
//   [course]
//   pieces = [
//     { straight_mm = 800.0 },
//     { radius_mm = 350.0, turn_deg = 180.0 },
//   ]
//
// Only `format` and [course] must be there; what is left out has the default of its struct. Reading what was
// written gives the same scenario bit for bit.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw {

inline constexpr int format_version = 1;
inline constexpr std::size_t most_text_bytes = std::size_t{1}
                                               << 20;  // the largest valid scenario takes half of it

/// Reads and validates a whole scenario. `name` (a file name, "link", ...) goes into the error, which has the
/// form "name:line: key = value: rule". Never reads a value it does not understand: unknown keys, wrong types
/// and values out of range are errors. A whole number is taken where a number is wanted, never the other way
/// round.
Result<Scenario> read(std::string_view text, std::string_view name);

/// The whole text, every key included that has a value, in the order of fields.h.
std::string write(const Scenario& scenario);

/// The shortest text: what equals the default is left out, and so is what only serves the eye.
std::string write_short(const Scenario& scenario);

/// Sets one field by its path from text as TOML writes it ("0.25", "[12, -12]", "true"); words may go without
/// quotes
/// ("bar"). The field's own range is checked; call validate() when all fields are set. Unknown paths are
/// errors that name the nearest one.
Result<Scenario> set_key(const Scenario& scenario, std::string_view path, std::string_view value);

}  // namespace lw
