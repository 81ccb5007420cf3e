// Numbers that come from a hand are rounded to what a hand can mean, so that texts and links stay short.
#pragma once

#include <cmath>

namespace lw::view {

/// The nearest multiple of `grain` (0.01, 0.1, 1, 5, ...), as the double nearest to that decimal.
inline double tidy(double value, double grain) {
  // + 0.0 makes 0 of -0, which would be written with its sign.
  if (grain >= 1.0) return grain * std::rint(value / grain) + 0.0;
  const double per_unit = std::rint(1.0 / grain);
  return std::rint(value * per_unit) / per_unit + 0.0;
}

}  // namespace lw::view
