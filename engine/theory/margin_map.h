// Margins over P gain and base speed: where the loop can be set, at a glance.
#pragma once

#include <vector>

#include "engine/theory/loop.h"

namespace lw {

/// One cell a pair of gain and base; I and D as the loop has them.
struct MarginMap {
  std::vector<double> kp;    // columns
  std::vector<double> base;  // rows, fraction of full command
  // kp.size() x base.size(), row by row of base:
  std::vector<char> stable;  // 1 or 0
  std::vector<double>
      gain_db;  // upper gain margin; negative = the loop gain has to come down by so much; NaN = none
  std::vector<double> phase;     // rad; NaN = none
  std::vector<double> critical;  // one a row: critical gain of P alone at this base; NaN = none
};

/// Fills a map. Bases at or within the dead band make no loop: their cells are not stable, and NaN.
MarginMap margin_map(const SampledLoop& loop, std::vector<double> kp, std::vector<double> base);

}  // namespace lw
