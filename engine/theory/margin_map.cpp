#include "engine/theory/margin_map.h"

#include <algorithm>
#include <cmath>

#include "engine/theory/margins.h"

namespace lw {
namespace {

void add_row(SampledLoop& loop, MarginMap& map) {
  const auto [least, most] = std::minmax_element(map.kp.begin(), map.kp.end());
  const LoopGains gains = loop.gains;
  const Sweep over = sweep(loop, {*least, gains.ki, gains.kd}, {*most, gains.ki, gains.kd});
  map.critical.push_back(critical(loop).gain.value_or(NAN));
  for (const double kp : map.kp) {
    loop.gains.kp = kp;
    const Margins at = margins(loop, over, false);
    map.stable.push_back(at.stable ? 1 : 0);
    map.gain_db.push_back(at.gain_high ? decibels(*at.gain_high) : NAN);
    map.phase.push_back(at.phase.value_or(NAN));
  }
  loop.gains = gains;
}

void add_still_row(MarginMap& map) {
  map.critical.push_back(NAN);
  map.stable.insert(map.stable.end(), map.kp.size(), 0);
  map.gain_db.insert(map.gain_db.end(), map.kp.size(), NAN);
  map.phase.insert(map.phase.end(), map.kp.size(), NAN);
}

}  // namespace

MarginMap margin_map(const SampledLoop& loop, std::vector<double> kp, std::vector<double> base) {
  MarginMap map;
  map.kp = std::move(kp);
  map.base = std::move(base);
  if (map.kp.empty()) return map;
  SampledLoop at = loop;
  for (const double value : map.base) {
    if (value <= loop.dead_band) {
      add_still_row(map);
      continue;
    }
    set_base(at, value);
    add_row(at, map);
  }
  return map;
}

}  // namespace lw
