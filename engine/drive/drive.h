// One drive: the closed loop from the start until finished, line lost or time out.
//
//   auto plan = make_plan(scenario);
//   Trace trace;
//   Summary summary = drive(*plan, &trace);
//
// Deviation statistics weigh every loop period alike, from t = 0. Progress and deviation are the guide
// point's.
#pragma once

#include <cstdint>
#include <string>

#include "engine/drive/plan.h"
#include "engine/drive/trace.h"

namespace lw {

/// Results of a drive, SI units unless named otherwise.
struct Summary {
  Outcome outcome = Outcome::time_out;
  double time = 0.0;              // s, of the loop period at which the drive ended
  double progress = 0.0;          // m along the centreline, over all laps
  double mean_speed = 0.0;        // m/s, progress made over time
  double deviation_mean = 0.0;    // m, signed: left positive
  double deviation_rms = 0.0;     // m
  double deviation_max = 0.0;     // m, largest magnitude
  double deviation_max_at = 0.0;  // m of progress where that was
  double error_mean = 0.0;        // fraction of full scale, mm for a bar
  double saturated = 0.0;         // share of loop periods with steer or a wheel command at its limit
  double reversals_per_s = 0.0;   // changes of the sign of steer
  bool slid = false;              // tyres slid at least once
  std::int64_t steps = 0;         // loop periods, equal to the rows of the trace
};

/// Runs drive number `number` (its noise and jitter draws) of a plan. Fills `trace` when given.
Summary drive(const Plan& plan, Trace* trace = nullptr, std::uint64_t number = 0);

/// How a line was lost: in parts what reason() says in a sentence.
struct Loss {
  double left_at = 0.0;  // m of progress over all laps, where the deviation passed what counts as lost
  double from = 0.0;     // m of arc length, in [0, length), where the vehicle began to leave
  std::string why;       // "steer saturated"
  std::string where;     // "in the 150 mm bend"; empty where the course has no word for it
};
/// Needs the trace of a drive that ended as line_lost.
Loss loss_of(const Plan& plan, const Trace& trace);

/// Why a drive ended as it did, in words for a headline, such as
/// "leaves the line at 2.31 m: steer saturated in the 150 mm bend". Needs the trace of that drive.
std::string reason(const Plan& plan, const Summary& summary, const Trace& trace);

}  // namespace lw
