// Round ticks and thinned-out curves: what a chart needs besides ink.
#pragma once

#include <array>
#include <cstddef>
#include <span>
#include <vector>

#include "engine/drive/trace.h"
#include "web/panel/strip_picture.h"

namespace lw::panel {

/// Multiples of 1, 2 or 5 times a power of ten within [low, high], at most `most` of them.
struct Ticks {
  double step = 1.0;
  int decimals = 0;  // that tell neighbouring ticks apart
  std::vector<double> at;
};
Ticks ticks_of(double low, double high, int most);

/// What of a row a curve shows.
struct Curve {
  const char* name;
  double TraceRow::*member;
  double scale;  // to the unit on the screen
};

/// Lowest, highest and last value of the curve in each of `columns` equal parts of [from, to] (s). Each
/// begins with the value that holds there, that of the row before, so that neighbours share a value; parts
/// outside the drive are NaN.
Decimated decimate(std::span<const TraceRow> rows, const Curve& curve, double from, double to,
                   std::size_t columns);

}  // namespace lw::panel
