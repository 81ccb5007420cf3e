// A test signal for a controller alone: an error of ramps, holds and steps in, every term of the law out,
// loop by loop. A team feeds the same error to the code on its vehicle and compares number by number.
//
// The signal is a list of knots, each a level reached on a straight ramp within a duration; the first ramp
// starts at an error of 0 at t = 0. A hold repeats a level, a step has a duration of 0:
//   0@0.1, 0.2@0, 0.2@0.5, -0.1@1       rest, step to 0.2, hold for half a second, fall to -0.1 in a second
// The loop runs at t = k T from 0 to the end of the last knot, at its nominal period without jitter; at a
// step it reads the level after it.
//
// Errors are in the unit the law is given: fraction of full scale, mm for a bar. Outputs are fractions of
// full command.
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "engine/controller/controller.h"
#include "engine/numeric/result.h"

namespace lw {

struct Knot {
  double level = 0.0;     // of the error
  double duration = 0.0;  // s, >= 0, of the ramp that ends at the level
};

inline constexpr std::size_t most_knots = 1000;
inline constexpr double most_signal_loops = 1e6;

/// Reads "LEVEL@SECONDS,LEVEL@SECONDS,...", blanks allowed. Errors name the entry and the rule.
Result<std::vector<Knot>> read_knots(std::string_view text);

/// The error at a time (s). Before 0 it is 0, after the end the last level.
double signal_at(const std::vector<Knot>& knots, double t);
/// s
double duration_of(const std::vector<Knot>& knots);

/// One loop of the check.
struct SignalRow {
  double t = 0.0;  // s
  double error = 0.0;
  double p = 0.0, i = 0.0, d = 0.0, steer = 0.0, left = 0.0, right = 0.0;
};

/// Runs the law from rest over the signal, one row a loop. Error: more than most_signal_loops loops.
Result<std::vector<SignalRow>> answer_to(const std::vector<Knot>& knots, const Law<double>& law,
                                         const LawWiring& wiring, double period);

/// The rows as CSV, header t_s,error,p,i,d,steer,left,right; numbers read back to the same bits.
std::string csv_of(const std::vector<SignalRow>& rows);

}  // namespace lw
