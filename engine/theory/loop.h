// The loop around a straight at the base speed, linear and sampled exactly.
//
// Vehicle, for small deviation and heading, between commands:
//   y' = v theta,   theta' = w,   w' = (K steer - w) / t        (w = K steer for a turning lag t of 0)
// with y the axle's offset from the line, v the speed at the base command and K the yaw rate that one unit of
// steer settles to, both through dead band, supply and wheel radii. The guide point's deviation is
//   d = y + forward theta,
// so the forward offset gives the loop the derivative of y, over forward / v seconds, without any noise.
//
// A command is held for a period T and acts a delay tau = q T + f late, 0 <= f < T: within a period the
// command before it acts for f, itself for T - f. With the matrix exponential in closed form this gives,
// written in s = z - 1, which keeps its digits where poles crowd near z = 1,
//   d / steer = z^-q (N0(s) + N1(s) / z) / (s^2 (s + 1 - e^(-T/t))),   N0, N1 quadratic in s
// (Astrom and Wittenmark, "Computer-Controlled Systems", chapter 2: sampling a system with a fractional
// delay; here by hand for this one). Sensors: error = -slope d (sensor_slope.h), low-pass a z / (z - 1 + a),
// a = T / (lag + T). Law, gains per loop: kp + ki z / (z - 1) + kd b (z - 1) / (z - 1 + b), b = T / (filter +
// T).
//
// The open loop is L = law * path, the closed loop's characteristic equation 1 + L = 0. What a linear loop
// cannot hold is left out, and `notes` says which of it the scenario has.
#pragma once

#include <complex>
#include <string>
#include <vector>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw {

/// Gains of the law per loop; ki and kd per second are ki / T and kd T.
struct LoopGains {
  double kp = 0.0, ki = 0.0, kd = 0.0;  // steer per unit of error (fraction of full scale, or mm for a bar)
};

/// d / steer of the sampled vehicle in s = z - 1, as in the essay.
struct SampledPlant {
  int waiting = 0;                // q, whole periods a command waits
  bool split = false;             // a part of a period remains, so that N1 counts
  bool lags = false;              // the turning lag is not 0: the factor (s + settles) is there
  double settles = 1.0;           // 1 - e^(-T/t)
  double n0[3] = {}, n1[3] = {};  // m per unit of steer, coefficients of 1, s, s^2
};

struct SampledLoop {
  double speed = 0.0;       // m/s, v
  double yaw_gain = 0.0;    // rad/s per unit of steer, K
  double turn_time = 0.0;   // s, t
  double forward = 0.0;     // m
  double period = 0.0;      // s, T
  double delay = 0.0;       // s, tau, with the mean extra age of readings that are refreshed
  double slope = 0.0;       // error per m of deviation, > 0
  double rest = 0.0;        // m, the deviation at which the error is 0
  double sensor_lag = 0.0;  // s
  double filter = 0.0;      // s, of D
  LoopGains gains;

  double base = 0.0;             // fraction of full command
  double dead_band = 0.0;        // fraction of full command
  double speed_past_dead = 0.0;  // m/s per unit of command beyond the dead band
  double yaw_unlimited = 0.0;    // rad/s per unit of steer while no wheel command is at its limit

  SampledPlant plant;              // follows from the above: sample()
  std::vector<std::string> notes;  // what the figures leave out or take as a mean, a sentence each
};

/// Reads the loop out of a scenario; the course matters only by the width of its line. Errors: those of
/// validate; a base within the dead band; a steer limit of 0; sensors without a slope (sensor_slope.h).
Result<SampledLoop> linearise(const Scenario& scenario);

/// Works out `plant` again after a change of any member above it.
void sample(SampledLoop& loop);

/// Sets base (fraction of full command), the speed and yaw gain that go with it, and samples again. At full
/// command the faster wheel has nothing left, so steer has half its effect.
void set_base(SampledLoop& loop, double base);

/// The loop with another law; ki and kd per loop.
SampledLoop with_gains(SampledLoop loop, LoopGains gains);

/// Frequency responses at z = e^(j omega T), omega in rad/s, in (0, pi / T].
std::complex<double> law_response(const SampledLoop& loop, double omega);   // error -> steer
std::complex<double> path_response(const SampledLoop& loop, double omega);  // steer -> minus the error
std::complex<double> response(const SampledLoop& loop, double omega);       // the open loop L
/// The law's terms for a gain of 1: law = kp + ki integral + kd derivative.
std::complex<double> integral_response(const SampledLoop& loop, double omega);
std::complex<double> derivative_response(const SampledLoop& loop, double omega);

/// How far the forward offset carries P alone. Small gains are stable exactly when
///   forward / v > t + tau + T / 2 + sensor lag,
/// the lead of the offset against all that comes late (expand the phase of L at low frequency: the held
/// command costs half a period, the low-pass its time constant, exactly).
struct SpeedLimit {
  double lead = 0.0;   // s, forward / v
  double late = 0.0;   // s, the right side
  double speed = 0.0;  // m/s, forward / late: P alone is stable for no small gain above it; may be infinite
  double base = 0.0;   // the base command that drives so fast; above 1 = beyond this vehicle
};
SpeedLimit speed_limit(const SampledLoop& loop);

/// The same as a sentence, with its numbers.
std::string in_words(const SpeedLimit& limit, const SampledLoop& loop);

}  // namespace lw
