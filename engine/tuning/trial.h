// A setting tried at once: what the linear loop says of it, and one drive on the scenario's own course; and
// which of several to take.
//
// Neither can stand for the other. The loop knows how near to swinging up a setting is but no bend, no noise
// and no limit of the motors; the drive has all of these but shows one course and one draw of the noise.
//   contradicted   the loop is not stable, or its gain margin is under 3 dB (a battery or a floor away from
//                  it), or the drive does not finish. Never recommended.
//   near the edge  the sensitivity peak is above 2 (Astrom and Hagglund 2006, "Advanced PID Control": 1.2 to
//                  2.0 are sensible), or steer is saturated over 20 % of the drive. Recommended only where
//                  nothing better is left.
// Of the rest the one with the least rms deviation is recommended; where others come within 5 % of it, the
// one of them with the lowest sensitivity peak.
#pragma once

#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "engine/drive/drive.h"
#include "engine/theory/margins.h"

namespace lw {

inline constexpr double least_gain_margin = 1.41254;  // 3 dB
inline constexpr double sensible_sensitivity = 2.0;
inline constexpr double much_saturation = 0.2;  // share of loops
inline constexpr double as_good = 1.05;         // of rms deviation

struct Trial {
  std::string name, source;
  LoopGains gains;      // per loop
  double filter = 0.0;  // s, of D
  Margins margins;
  Summary drive;
  std::string how_it_went;  // the drive, in words
  std::string against;      // what contradicts it, in words; empty = nothing
  std::string near_edge;    // why it is only a last choice; empty = it is not
};

/// Tries one setting. `loop` is the scenario's, `ground` its course. Errors: those of make_plan.
Result<Trial> tried(const Scenario& scenario, const SampledLoop& loop, std::shared_ptr<const Ground> ground,
                    std::string name, std::string source, const LoopGains& gains, double filter);

struct Choice {
  std::optional<std::size_t> index;  // into the trials
  std::string reason;                // in words; also why none is
};
Choice recommended(const std::vector<Trial>& trials);

}  // namespace lw
