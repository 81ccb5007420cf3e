#include "web/panel/axis.h"

#include <algorithm>
#include <cmath>
#include <limits>

namespace lw::panel {

Ticks ticks_of(double low, double high, int most) {
  Ticks ticks;
  if (!(high > low) || most < 1) return ticks;
  const double rough = (high - low) / most;
  const int power = static_cast<int>(std::floor(std::log10(rough)));
  const double unit = std::pow(10.0, power);
  int decimals = -power;
  double step = 10.0 * unit;
  for (double factor : {1.0, 2.0, 5.0}) {
    if (factor * unit >= rough * (1 - 1e-12)) {
      step = factor * unit;
      break;
    }
  }
  if (step >= 10.0 * unit) --decimals;
  ticks.step = step;
  ticks.decimals = std::max(0, decimals);
  const double first = std::ceil(low / step - 1e-9), last = std::floor(high / step + 1e-9);
  for (double n = first; n <= last; n += 1.0) ticks.at.push_back(n * step + 0.0);
  return ticks;
}

Decimated decimate(std::span<const TraceRow> rows, const Curve& curve, double from, double to,
                   std::size_t columns) {
  constexpr float nothing = std::numeric_limits<float>::quiet_NaN();
  const std::vector<float> blank(columns, nothing);
  Decimated out{blank, blank, blank};
  if (rows.empty() || !(to > from) || columns == 0) return out;
  const double per_column = (to - from) / static_cast<double>(columns);
  const auto value = [&](std::size_t row) {
    return static_cast<float>(rows[row].*curve.member * curve.scale);
  };
  const auto after = std::upper_bound(rows.begin(), rows.end(), from,
                                      [](double time, const TraceRow& row) { return time < row.t; });
  std::size_t next = static_cast<std::size_t>(after - rows.begin());
  for (std::size_t c = 0; c < columns; ++c) {
    const double end = from + static_cast<double>(c + 1) * per_column;
    if (end < rows.front().t || end - per_column > rows.back().t) continue;
    float last = next > 0 ? value(next - 1) : value(0), low = last, high = last;
    for (; next < rows.size() && rows[next].t < end; ++next) {
      last = value(next);
      low = std::min(low, last);
      high = std::max(high, last);
    }
    out.low[c] = low;
    out.high[c] = high;
    out.last[c] = last;
  }
  return out;
}

}  // namespace lw::panel
