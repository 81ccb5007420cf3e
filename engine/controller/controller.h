// One step of the control law of a line-guided vehicle.
//
//   P = kp e
//   I = I + ki e, held to the integral limit; left alone when P + I + D would then be beyond the steer limit
//   and ki e pushes
//       further that way (conditional integration against wind-up)
//   D = kd (e - e before) through a first-order filter, D += a (kd (e - e before) - D), a = T / (filter + T);
//   0 in the first loop steer = P + I + D, held to the steer limit; positive turns left left command = base -
//   steer, right command = base + steer, each held to [-1, 1] and rounded to the command step
//
// Gains per loop act per loop whatever the period T just elapsed, as code without a clock does; gains per
// second act as ki T and kd / T, as code with one does. Steer, base and terms are fractions of full command;
// e is a fraction of full scale, or mm for a bar of sensors.
#pragma once

#include "engine/numeric/lanes.h"

namespace lw {

/// Constants of the law.
template <class L>
struct Law {
  L base;                                  // fraction of full command
  L ease;                                  // share of base given up per unit of |e|
  L kp, ki, kd;                            // per loop or per second as wired
  L filter;                                // s, time constant of D
  L integral_limit, steer_limit;           // fractions of full command
  L command_step, command_steps_per_unit;  // rounding, and its inverse
};

struct LawWiring {
  bool per_second = false;
  bool rounding = false;
};

/// What the law remembers between loop periods.
template <class L>
struct LawState {
  L error_before, integral, derivative;
};

/// What one step gives.
template <class L>
struct Terms {
  L p, i, d, steer;
  L left, right;
  Mask<L> saturated;  // steer or a wheel command was held at its limit
};

/// One step: the error, the period just elapsed (s), and whether this is the first loop.
template <class L>
inline Terms<L> control(const Law<L>& law, const LawWiring& wiring, L error, L elapsed, Mask<L> first,
                        LawState<L>& state) {
  Terms<L> terms;
  const L change = select(first, all_lanes<L>(0.0), error - state.error_before);
  state.error_before = error;
  const L kick = wiring.per_second ? law.kd * change / elapsed : law.kd * change;
  const L share = elapsed / (law.filter + elapsed);
  state.derivative = select(first, all_lanes<L>(0.0), state.derivative + share * (kick - state.derivative));
  terms.p = law.kp * error;
  terms.d = state.derivative;

  const L push = wiring.per_second ? law.ki * elapsed * error : law.ki * error;
  const L grown = held(state.integral + push, -law.integral_limit, law.integral_limit);
  const L wanted = terms.p + grown + terms.d;
  const Mask<L> winds_up = (magnitude(wanted) > law.steer_limit) & (wanted * push > 0.0);
  state.integral = select(winds_up, state.integral, grown);
  terms.i = state.integral;

  const L sum = terms.p + terms.i + terms.d;
  terms.steer = held(sum, -law.steer_limit, law.steer_limit);
  const L base = greater(law.base * (1.0 - law.ease * magnitude(error)), all_lanes<L>(0.0));
  const L one = all_lanes<L>(1.0);
  const L left = base - terms.steer, right = base + terms.steer;
  terms.saturated = (magnitude(sum) > law.steer_limit) | (magnitude(left) > 1.0) | (magnitude(right) > 1.0);
  const auto command = [&](L wish) {
    const L inside = held(wish, -one, one);
    if (!wiring.rounding) return inside;
    return held(law.command_step * nearest_whole(inside * law.command_steps_per_unit), -one, one);
  };
  terms.left = command(left);
  terms.right = command(right);
  return terms;
}

}  // namespace lw
