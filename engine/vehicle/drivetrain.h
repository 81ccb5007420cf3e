// Wheels, motors and pose of a vehicle with two driven wheels on one axle.
//
// A command in [-1, 1] passes the motor's dead band, g(c) = sign(c) max(0, |c| - d) / (1 - d), and times the
// full speed is the speed its wheel heads for. Both wheels share one body, so mean and half-difference of the
// wheel speeds,
//   common = (right + left) / 2,   difference = (right - left) / 2   (rad/s),
// each follow a first-order lag of their own, with the time constants of going forward and of turning. While
// commands are held both are exact exponentials, and so is their integral:
//   w(h) = a + (w0 - a) e^(-h/T),   integral = a h + (w0 - a) T (1 - e^(-h/T)).
// With wheel radii rL, rR and track width b
//   v = ((rR + rL) common + (rR - rL) difference) / 2,   yaw rate = ((rR - rL) common + (rR + rL) difference)
//   / b.
// Heading over an interval is thereby exact; position is by three-point Gauss-Legendre quadrature of v (cos,
// sin) of it (Abramowitz and Stegun 25.4.30), whose error falls with the sixth power of the interval.
//
// Grip: where |v * yaw rate|, of the interval's means, exceeds mu g the tyres slide: the turn made in that
// interval is held to mu g / |v|, evenly over the interval. The wheels go on as they would.
//
// Frame: metres, x right, y up, heading counter-clockwise; a positive difference turns left.
#pragma once

#include "engine/numeric/functions.h"

namespace lw {

/// Constants of a vehicle.
template <class L>
struct Drivetrain {
  L speed_per_common, speed_per_difference;  // m: half the sum of the radii, half of right minus left
  L yaw_per_common, yaw_per_difference;      // 1: twice those over the track width, the other way round
  L dead_band;                               // fraction of full command
  L speed_past_dead_band;     // rad/s of a wheel per command beyond the dead band, supply included
  L forward_time, turn_time;  // s, time constants; 0 = at once
  L slide_limit;              // m/s^2, mu g; infinite when the tyres never slide
};

/// Where the axle's middle is and how the wheels turn.
template <class L>
struct Motion {
  L x, y, heading;       // m, m, rad
  L common, difference;  // rad/s
};

/// Speeds the two wheels head for, as mean and half-difference.
template <class L>
struct WheelTarget {
  L common, difference;  // rad/s
};

/// Abscissae of the three-point Gauss-Legendre rule on [0, 1], (1 - sqrt(3/5)) / 2, 1/2 and (1 + sqrt(3/5)) /
/// 2, and its weights.
inline constexpr double quadrature_share[3] = {0x1.cda042f0236e1p-4, 0.5, 0x1.c64bf7a1fb924p-1};
inline constexpr double quadrature_weight[3] = {5.0 / 18.0, 8.0 / 18.0, 5.0 / 18.0};

/// A first-order lag over an interval, at the three abscissae [0..2] and at the end [3].
template <class L>
struct Decay {
  L left[4];      // e^(-h/T), what is left of the gap
  L integral[4];  // s, T (1 - e^(-h/T)), the gap's integral
};

/// What depends on an interval's duration alone.
template <class L>
struct Interval {
  L duration;    // s, > 0
  L elapsed[3];  // s, at the abscissae
  Decay<L> forward, turn;
};

/// Duration and time constant in s. Two exponentials serve all four places.
template <class L>
inline Decay<L> make_decay(L duration, L time) {
  const L ratio = select(time > 0.0, duration / time, all_lanes<L>(1e6));  // a lag of 0 leaves nothing
  const L early = exponential(-quadrature_share[0] * ratio), half = exponential(-0.5 * ratio);
  const L end = half * half;
  Decay<L> decay{{early, half, end / early, end}, {}};
  for (int place = 0; place < 4; ++place) decay.integral[place] = time * (1.0 - decay.left[place]);
  return decay;
}

template <class L>
inline Interval<L> make_interval(const Drivetrain<L>& train, L duration) {
  return {duration,
          {duration * quadrature_share[0], duration * quadrature_share[1], duration * quadrature_share[2]},
          make_decay(duration, train.forward_time),
          make_decay(duration, train.turn_time)};
}

template <class L>
inline L axle_speed(const Drivetrain<L>& train, L common, L difference) {
  return common * train.speed_per_common + difference * train.speed_per_difference;
}
template <class L>
inline L axle_yaw(const Drivetrain<L>& train, L common, L difference) {
  return common * train.yaw_per_common + difference * train.yaw_per_difference;
}

/// The wheel speeds that a pair of commands in [-1, 1] heads for.
template <class L>
inline WheelTarget<L> wheel_target(const Drivetrain<L>& train, L left, L right) {
  const auto speed = [&](L command) {
    const L beyond = greater(magnitude(command) - train.dead_band, all_lanes<L>(0.0));
    return with_sign(beyond * train.speed_past_dead_band, command);
  };
  const L speed_left = speed(left), speed_right = speed(right);
  return {0.5 * (speed_right + speed_left), 0.5 * (speed_right - speed_left)};
}

/// Moves on by one interval under a constant target. Returns where the tyres slid.
template <class L>
inline Mask<L> advance(const Drivetrain<L>& train, const Interval<L>& interval, WheelTarget<L> target,
                       Motion<L>& motion) {
  const L common_gap = motion.common - target.common;
  const L difference_gap = motion.difference - target.difference;
  const Decay<L>&forward = interval.forward, &turn = interval.turn;
  const auto common_turned = [&](int place, L elapsed) {  // rad, by the wheels on average
    return target.common * elapsed + common_gap * forward.integral[place];
  };
  const auto difference_turned = [&](int place, L elapsed) {
    return target.difference * elapsed + difference_gap * turn.integral[place];
  };

  L speed[3], heading_change[3];
  for (int place = 0; place < 3; ++place) {
    speed[place] = axle_speed(train, target.common + common_gap * forward.left[place],
                              target.difference + difference_gap * turn.left[place]);
    heading_change[place] = axle_yaw(train, common_turned(place, interval.elapsed[place]),
                                     difference_turned(place, interval.elapsed[place]));
  }
  const L common_whole = common_turned(3, interval.duration),
          difference_whole = difference_turned(3, interval.duration);
  L heading_whole = axle_yaw(train, common_whole, difference_whole);

  const L distance = magnitude(axle_speed(train, common_whole, difference_whole));
  const Mask<L> slides =
      magnitude(heading_whole) * distance > train.slide_limit * interval.duration * interval.duration;
  if (any(slides)) {
    const L held_turn =
        with_sign(train.slide_limit * interval.duration * interval.duration / distance, heading_whole);
    for (int place = 0; place < 3; ++place) {
      heading_change[place] = select(slides, held_turn * quadrature_share[place], heading_change[place]);
    }
    heading_whole = select(slides, held_turn, heading_whole);
  }

  for (int place = 0; place < 3; ++place) {
    const SineCosine<L> direction = sine_cosine(motion.heading + heading_change[place]);
    const L stretch = quadrature_weight[place] * interval.duration * speed[place];
    motion.x = motion.x + stretch * direction.cosine;
    motion.y = motion.y + stretch * direction.sine;
  }
  motion.heading = motion.heading + heading_whole;
  motion.common = target.common + common_gap * forward.left[3];
  motion.difference = target.difference + difference_gap * turn.left[3];
  return slides;
}

}  // namespace lw
