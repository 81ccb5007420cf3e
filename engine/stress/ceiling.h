// The ceiling: how fast a choice gets round the course at hand, found as on a floor by trying ever higher
// base speeds, and what stops it there.
//
// A ladder of base commands is driven from slow to fast over the same ground and with the same draws; between
// the highest rung that finishes and the first above it that does not, the border is closed in by bisection.
// More speed does not have to be worse: a cart that overshoots the line at one speed may meet it again at a
// higher one, and what times out when slow may finish when fast. So the ceiling is the upper end of the
// lowest stretch of rungs that finish: all that was tried below it, back to the start of that stretch,
// finishes. Rungs above that finish again are named as such and are no ceiling, since whatever moves the
// border a little loses them.
#pragma once

#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "engine/drive/drive.h"
#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw {

struct LadderSettings {
  double low_pct = 5.0;         // base, > 0
  double high_pct = 100.0;      // at most 100, above low
  double step_pct = 2.5;        // between the rungs of the first ladder, at least 0.1
  double resolution_pct = 0.1;  // the border is known to this, at least 0.0001
  std::uint64_t number = 0;     // of the drive: its noise and jitter draws, the same on every rung
};

/// One base that was driven.
struct Rung {
  double base_pct = 0.0;
  bool driven = false;    // false where no choice could be made for this base; `reason` says why
  Controller controller;  // as driven
  Summary summary;
  std::string reason;        // in a sentence
  std::optional<Loss> loss;  // of a lost line
  bool finished() const { return driven && summary.outcome == Outcome::finished; }
};

struct Ceiling {
  std::optional<double> base_pct;     // nothing when no rung finishes
  double speed = 0.0;                 // m/s, steady without steer at that base
  std::optional<double> slowest_pct;  // the lowest rung that finishes
  bool open = false;  // the highest rung of the ladder finishes: the vehicle itself is the limit
  std::optional<double> again_pct;  // the lowest base above the border that finishes again
  std::vector<Rung> steps;          // every base that was driven, rising

  /// The rung that finishes at the ceiling, and the one above it that sets it; nullptr where there is none.
  const Rung* last() const;
  const Rung* first_beyond() const;
};

/// A choice for every base: the controller to be driven there. An error becomes a rung that does not finish.
using Choice = std::function<Result<Controller>(double base_pct)>;

/// The scenario's own controller, with nothing but the base changed.
Choice own_choice(const Scenario& scenario);

/// Climbs the ladder. `ground` as in make_plan(). Errors: those of make_plan() for the scenario as it stands;
/// settings out of range.
Result<Ceiling> find_ceiling(const Scenario& scenario, const Choice& choice,
                             const LadderSettings& settings = {},
                             std::shared_ptr<const Ground> ground = nullptr);

/// The finding in words, with its numbers: how fast, what stops it and where, and what is odd about it.
std::string in_words(const Ceiling& ceiling);

}  // namespace lw
