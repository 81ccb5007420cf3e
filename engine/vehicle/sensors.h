// Reflectance sensors looking down at the floor, and the error made of their readings.
//
// Sensor i sits at (forward, lateral_i) from the axle's middle, left positive. Its reading, as a fraction of
// full scale, is
//   black + gain_i (white - black) F + offset_i + light . position + noise,
// F the floor's brightness averaged over the spot, then through the low-pass, rounded to the step and held to
// [0, 1]. With a refresh time the reading changes only at the first loop at or after each multiple of it.
//
// Error, positive where the vehicle has to turn left:
//   edge  target - reading on the line's left edge, reading - target on its right edge
//   pair  right reading - left reading
//   bar   centroid of the sensors weighted by darkness, in mm, left positive. When none sees the line, the
//   outermost offset on
//         the side where it was last seen. A sensor sees the line when its darkness is at least `sees_line`
//         of full contrast.
#pragma once

#include "engine/course/floor.h"
#include "engine/numeric/random.h"
#include "engine/scenario/scenario.h"
#include "engine/vehicle/drivetrain.h"

namespace lw {

inline constexpr int max_sensors = 16;
inline constexpr double sees_line = 0.2;  // share of the contrast between white and black

/// Constants of the sensors. Readings are fractions of full scale.
template <class L>
struct Optics {
  L forward;                // m
  L lateral[max_sensors];   // m, left positive
  L dark[max_sensors];      // reading on the line: black + offset
  L contrast[max_sensors];  // gain (white - black)
  L light_x, light_y;       // 1/m
  L noise;                  // standard deviation
  L step, steps_per_unit;   // rounding, and its inverse
  L lag;                    // s, low-pass time constant
  L refresh;                // s
  L target, edge_sign;      // scheme edge: error = edge_sign (target - reading)
  L white, per_contrast;    // scheme bar: darkness = (white - reading) per_contrast
  L outermost;              // mm, scheme bar: the largest |lateral|
};

/// What the sensors remember between loop periods.
template <class L>
struct SensorState {
  L filtered[max_sensors];  // behind the low-pass
  L reading[max_sensors];   // as the controller gets them
  L refresh_at;             // s, when the next reading is due
  L last_side;              // scheme bar: -1, 0 or 1
};

/// The raster as the loop reads it: plain pointers into a Floor.
struct FloorView {
  const std::int32_t* tile_start;
  const Cell* cells;
  double x0, y0, cells_per_m;
  double last_x, last_y;  // the last cell's number along each axis
  int tiles_x;
};
FloorView view_of(const Floor& floor);

/// Brightness at a point; a point beyond the raster gets its nearest cell.
template <class L>
inline L floor_brightness(const FloorView& floor, L x, L y) {
  const auto cell_number = [&](L at, double low, double last) {
    return held((at - low) * floor.cells_per_m, all_lanes<L>(0.5), all_lanes<L>(last + 0.5));
  };
  const L across = cell_number(x, floor.x0, floor.last_x), up = cell_number(y, floor.y0, floor.last_y);
  const L column = nearest_whole(across - 0.5), row = nearest_whole(up - 0.5);
  const L u = across - 0.5 - column, v = up - 0.5 - row;
  const Bits<L> i = index_of(column), j = index_of(row);

  L c0, c1, c2, c3;
  for (int k = 0; k < lane_count<L>; ++k) {
    const std::uint64_t at_x = lane(i, k), at_y = lane(j, k);
    const std::uint64_t tile =
        (at_y / tile_cells) * static_cast<std::uint64_t>(floor.tiles_x) + at_x / tile_cells;
    const Cell& cell = floor.cells[static_cast<std::uint64_t>(floor.tile_start[tile]) +
                                   (at_y % tile_cells) * tile_cells + at_x % tile_cells];
    set_lane(c0, k, static_cast<double>(cell.c0));
    set_lane(c1, k, static_cast<double>(cell.c1));
    set_lane(c2, k, static_cast<double>(cell.c2));
    set_lane(c3, k, static_cast<double>(cell.c3));
  }
  return cell_unit * ((c0 + c1 * u) + v * (c2 + c3 * u));
}

/// What sense() is told about the features in use; the same for every lane.
struct SensorWiring {
  Scheme scheme = Scheme::pair;
  int count = 2;
  int left = 0, right = 1;  // scheme pair: which of the two sits further left
  bool noise = false, rounding = false, lag = false, refresh = false, light = false;
};

/// The moment of a reading.
template <class L>
struct Moment {
  L t;            // s since the start
  L elapsed;      // s since the loop before
  Bits<L> step;   // number of the loop period
  Bits<L> drive;  // number of the drive
  Mask<L> first;  // the first loop of the drive
};

/// Reads every sensor at the pose given; `facing` is the sine and cosine of its heading.
template <class L>
inline void sense(const Optics<L>& optics, const SensorWiring& wiring, const FloorView& floor,
                  std::uint64_t seed, const Moment<L>& moment, const Motion<L>& motion,
                  const SineCosine<L>& facing, SensorState<L>& state) {
  const L guide_x = motion.x + optics.forward * facing.cosine,
          guide_y = motion.y + optics.forward * facing.sine;
  Mask<L> fresh = moment.first;
  if (wiring.refresh) {
    // a nanosecond of slack, so that multiples of the period meet multiples of the refresh time in spite of
    // rounding
    fresh = fresh | (moment.t + 1e-9 >= state.refresh_at);
    const L due = (whole_below((moment.t + 1e-9) / optics.refresh) + 1.0) * optics.refresh;
    state.refresh_at = select(fresh, due, state.refresh_at);
  }
  Words<L> words{};
  for (int i = 0; i < wiring.count; ++i) {
    const L x = guide_x - optics.lateral[i] * facing.sine, y = guide_y + optics.lateral[i] * facing.cosine;
    L value = optics.dark[i] + optics.contrast[i] * floor_brightness(floor, x, y);
    if (wiring.light) value = value + (optics.light_x * x + optics.light_y * y);
    if (wiring.noise) {
      if (i % 4 == 0) {
        const std::uint32_t stream =
            static_cast<std::uint32_t>(Purpose::noise) + static_cast<std::uint32_t>(i / 4);
        words = draw<L>(seed, moment.drive, moment.step, stream);
      }
      const int half = i % 4 / 2 * 2;
      const NormalPair<L> pair = normal_from<L>(words.word[half], words.word[half + 1]);
      value = value + optics.noise * (i % 2 == 0 ? pair.first : pair.second);
    }
    if (wiring.lag) {
      const L share = moment.elapsed / (optics.lag + moment.elapsed);
      const L followed = state.filtered[i] + share * (value - state.filtered[i]);
      value = state.filtered[i] = select(moment.first, value, followed);
    }
    if (wiring.rounding) value = optics.step * nearest_whole(value * optics.steps_per_unit);
    value = held(value, all_lanes<L>(0.0), all_lanes<L>(1.0));
    state.reading[i] = wiring.refresh ? select(fresh, value, state.reading[i]) : value;
  }
}

template <class L>
inline L bar_error(const Optics<L>& optics, int count, SensorState<L>& state) {
  L sum = all_lanes<L>(0.0), moment = sum, darkest = sum;
  for (int i = 0; i < count; ++i) {
    const L darkness = greater((optics.white - state.reading[i]) * optics.per_contrast, all_lanes<L>(0.0));
    sum = sum + darkness;
    moment = moment + darkness * optics.lateral[i];
    darkest = greater(darkest, darkness);
  }
  const Mask<L> seen = darkest >= sees_line;
  const L centroid = 1e3 * (moment / sum);
  const L side =
      select(centroid > 0.0, all_lanes<L>(1.0), select(centroid < 0.0, all_lanes<L>(-1.0), state.last_side));
  state.last_side = select(seen, side, state.last_side);
  return select(seen, centroid, state.last_side * optics.outermost);
}

/// The error the controller is given: fraction of full scale, mm for a bar.
template <class L>
inline L error_from(const Optics<L>& optics, const SensorWiring& wiring, SensorState<L>& state) {
  switch (wiring.scheme) {
    case Scheme::edge:
      return optics.edge_sign * (optics.target - state.reading[0]);
    case Scheme::pair:
      return state.reading[wiring.right] - state.reading[wiring.left];
    case Scheme::bar:
      return bar_error(optics, wiring.count, state);
  }
  return all_lanes<L>(0.0);
}

}  // namespace lw
