// Every field of a scenario, each listed once.
//
// each_field() below is the single list from which reading, writing, links, validation, comparing, hashing,
// `--set`, tolerances and the panel work. Adding a field is a member in scenario.h and one entry here, in the
// order in which the text is written. An entry gives
//   section and key   as in the scenario text; together "vehicle.wheel_left_mm". Top-level keys have section
//   "" label, unit       for a screen; the unit is the one of the value as stored, "" = plain number range of
//   the value, or of every entry of an array; NaN and infinities never lie in a range grain             the
//   smallest change worth making by hand (step of a slider, digits on a screen); 0 = not a number meaning one
//   sentence most              entries of an array, bytes of a string, at most
// The ranges are wide: they keep out what the model cannot compute or what is a slip of the keyboard, and
// leave judgement to the user. Rules that tie fields together are in engine/scenario/validate.h.
//
// Types a visitor meets: double, std::int64_t, bool, std::string, Scheme, Edge, GainUnit, Point,
// std::vector of double, int, Piece, Point, Stretch or Spread, std::optional of double or Outcome.
#pragma once

#include <cstddef>
#include <span>
#include <string>
#include <string_view>
#include <type_traits>

#include "engine/scenario/scenario.h"

namespace lw {

/// Allowed values, ends included unless marked open.
struct Range {
  double low = 0.0;
  double high = 0.0;
  bool low_open = false;
  bool high_open = false;

  constexpr bool holds(double value) const {
    const bool above = low_open ? value > low : value >= low;
    const bool below = high_open ? value < high : value <= high;
    return above && below;
  }
};

/// What is known of a field besides its value; the parts are explained at the top of this file.
struct FieldInfo {
  std::string_view section;
  std::string_view key;
  std::string_view label;
  std::string_view unit;
  Range range;
  double grain = 0.0;
  std::string_view meaning;
  std::size_t most = 1;
};

/// "section.key", or the key alone at the top level.
inline std::string path_of(const FieldInfo& info) {
  std::string path(info.section);
  if (!path.empty()) path += '.';
  return path += info.key;
}

// Names of enum values as in the scenario text, in the order of the enum.
inline constexpr std::string_view scheme_names[] = {"edge", "pair", "bar"};
inline constexpr std::string_view edge_names[] = {"left", "right"};
inline constexpr std::string_view gain_unit_names[] = {"per_loop", "per_second"};
inline constexpr std::string_view spread_kind_names[] = {"uniform", "normal"};
inline constexpr std::string_view outcome_names[] = {"finished", "line_lost", "time_out"};

constexpr std::span<const std::string_view> names_of(Scheme) { return scheme_names; }
constexpr std::span<const std::string_view> names_of(Edge) { return edge_names; }
constexpr std::span<const std::string_view> names_of(GainUnit) { return gain_unit_names; }
constexpr std::span<const std::string_view> names_of(SpreadKind) { return spread_kind_names; }
constexpr std::span<const std::string_view> names_of(Outcome) { return outcome_names; }

template <class E>
concept NamedEnum = std::is_enum_v<E> && requires(E value) {
  names_of(value);
};

template <NamedEnum E>
constexpr std::string_view name_of(E value) {
  return names_of(value)[static_cast<std::size_t>(value)];
}

inline constexpr std::size_t most_sensors = 16;
inline constexpr std::size_t most_points = 5000;
inline constexpr std::size_t most_pieces = 5000;
inline constexpr std::size_t most_gaps = 1000;
inline constexpr std::size_t most_spreads = 200;
inline constexpr double seed_high = 9007199254740992.0;  // 2^53: every whole number up to it is a double

template <class S, class Visit>
void each_vehicle_field(S& vehicle, Visit&& visit) {
  const auto field = [&](auto& value, std::string_view key, std::string_view label, std::string_view unit,
                         Range range, double grain, std::string_view meaning) {
    visit(FieldInfo{"vehicle", key, label, unit, range, grain, meaning}, value);
  };
  field(vehicle.track_width_mm, "track_width_mm", "Track width", "mm", {10, 5000}, 1,
        "Distance between the contact points of the two drive wheels.");
  field(vehicle.wheel_left_mm, "wheel_left_mm", "Left wheel", "mm", {5, 1000}, 0.1,
        "Rolling diameter of the left wheel.");
  field(vehicle.wheel_right_mm, "wheel_right_mm", "Right wheel", "mm", {5, 1000}, 0.1,
        "Rolling diameter of the right wheel.");
  field(vehicle.top_speed_rpm, "top_speed_rpm", "Top speed", "rpm", {1, 100000}, 1,
        "Speed of a wheel at full command without load and with full supply.");
  field(vehicle.supply_pct, "supply_pct", "Supply", "%", {1, 200}, 1,
        "State of the battery: scales the top speed of both wheels.");
  field(vehicle.forward_time_constant_ms, "forward_time_constant_ms", "Forward lag", "ms", {0, 10000}, 1,
        "Time constant with which the mean of the wheel speeds follows its command; 0 = at once.");
  field(vehicle.turn_time_constant_ms, "turn_time_constant_ms", "Turning lag", "ms", {0, 10000}, 1,
        "Time constant with which the difference of the wheel speeds follows its command; 0 = at once.");
  field(vehicle.dead_band_pct, "dead_band_pct", "Dead band", "%", {0, 100, false, true}, 0.5,
        "A command smaller than this turns no wheel.");
  field(vehicle.command_step_pct, "command_step_pct", "Command step", "%", {0, 100}, 0.5,
        "Wheel commands are rounded to whole steps; 0 = continuous.");
  field(vehicle.command_delay_ms, "command_delay_ms", "Command delay", "ms", {0, 1000}, 0.1,
        "Time from reading the sensors to the command taking effect.");
  field(vehicle.grip, "grip", "Grip", "", {0, 10}, 0.05,
        "Friction coefficient between tyre and floor; 0 = never slides.");
}

template <class S, class Visit>
void each_loop_field(S& loop, Visit&& visit) {
  visit(FieldInfo{"loop",
                  "period_ms",
                  "Period",
                  "ms",
                  {0.1, 1000},
                  0.1,
                  "Time from one run of the control loop to the next."},
        loop.period_ms);
  visit(FieldInfo{"loop",
                  "jitter_pct",
                  "Jitter",
                  "%",
                  {0, 90},
                  1,
                  "Each period is drawn afresh, evenly within this share of the nominal period either way."},
        loop.jitter_pct);
}

template <class S, class Visit>
void each_sensors_field(S& sensors, Visit&& visit) {
  const auto field = [&](auto& value, std::string_view key, std::string_view label, std::string_view unit,
                         Range range, double grain, std::string_view meaning, std::size_t most = 1) {
    visit(FieldInfo{"sensors", key, label, unit, range, grain, meaning, most}, value);
  };
  field(sensors.scheme, "scheme", "Scheme", "", {}, 0,
        "How readings become an error: one sensor on an edge, a pair astride the line, or a bar of 3 to 16.");
  field(sensors.forward_mm, "forward_mm", "Forward", "mm", {0, 5000}, 1,
        "Distance of the sensors ahead of the axle.");
  field(sensors.lateral_mm, "lateral_mm", "Lateral", "mm", {-1000, 1000}, 0.5,
        "Offset of each sensor from the middle of the vehicle, left positive.", most_sensors);
  field(sensors.spot_mm, "spot_mm", "Spot", "mm", {0.5, 200}, 0.5,
        "Diameter of the disc of floor over which a sensor averages.");
  field(sensors.black_pct, "black_pct", "Black", "%", {0, 100}, 1, "Reading over the line.");
  field(sensors.white_pct, "white_pct", "White", "%", {0, 100}, 1, "Reading over the bare floor.");
  field(sensors.noise_pct, "noise_pct", "Noise", "%", {0, 100}, 0.1,
        "Standard deviation of a reading, in points of reading.");
  field(sensors.step_pct, "step_pct", "Reading step", "%", {0, 100}, 0.5,
        "Readings are rounded to whole steps; 0 = continuous.");
  field(sensors.gain, "gain", "Gain", "", {0, 100}, 0.01,
        "Factor on (reading - black), one a sensor; left out = 1 for all.", most_sensors);
  field(sensors.offset_pct, "offset_pct", "Offset", "%", {-100, 100}, 0.5,
        "Added to the reading, one a sensor; left out = 0 for all.", most_sensors);
  field(sensors.refresh_ms, "refresh_ms", "Refresh", "ms", {0, 10000}, 0.5,
        "The reading changes only at the first loop at or after each refresh; 0 = at every loop.");
  field(sensors.lag_ms, "lag_ms", "Sensor lag", "ms", {0, 10000}, 0.5,
        "Time constant of the low-pass of a reading; 0 = none.");
  field(sensors.edge, "edge", "Edge", "", {}, 0, "The edge of the line to follow; scheme edge only.");
  field(sensors.target_pct, "target_pct", "Target", "%", {0, 100}, 1,
        "The reading to hold; scheme edge only.");
}

template <class S, class Visit>
void each_controller_field(S& controller, Visit&& visit) {
  const auto field = [&](auto& value, std::string_view key, std::string_view label, std::string_view unit,
                         Range range, double grain, std::string_view meaning) {
    visit(FieldInfo{"controller", key, label, unit, range, grain, meaning}, value);
  };
  field(controller.base_pct, "base_pct", "Base speed", "%", {0, 100}, 1,
        "Command of both wheels when nothing is to be corrected.");
  field(controller.kp, "kp", "Kp", "", {-1e6, 1e6}, 0.005,
        "Proportional gain: share of full command per unit of error (full scale; mm for a bar).");
  field(controller.ki, "ki", "Ki", "", {-1e6, 1e6}, 0.0005, "Integral gain, in the unit that `gains` names.");
  field(controller.kd, "kd", "Kd", "", {-1e6, 1e6}, 0.005,
        "Derivative gain, in the unit that `gains` names.");
  field(controller.gains, "gains", "Gains", "", {}, 0, "Whether Ki and Kd count per loop or per second.");
  field(controller.derivative_filter_ms, "derivative_filter_ms", "D filter", "ms", {0, 10000}, 0.5,
        "Time constant of the filter on the derivative term; 0 = none.");
  field(controller.integral_limit_pct, "integral_limit_pct", "I limit", "%", {0, 10000}, 1,
        "The integral term is held within this share of full command either way.");
  field(controller.steer_limit_pct, "steer_limit_pct", "Steer limit", "%", {0, 1000}, 1,
        "Steer is held within this share of full command either way.");
  field(controller.ease, "ease", "Ease", "", {0, 1000}, 0.05,
        "Base falls to base (1 - ease |e|), never below 0; e of full scale, for a bar of the outermost "
        "offset.");
}

/// The fields of one piece of a course; which of them go together is checked in validate.h.
template <class S, class Visit>
void each_piece_field(S& piece, Visit&& visit) {
  const std::string_view section = "course.pieces";
  visit(FieldInfo{section, "straight_mm", "Length", "mm", {0, 1e6, true}, 10, "Length of a straight."},
        piece.straight_mm);
  visit(FieldInfo{section, "radius_mm", "Radius", "mm", {0, 1e6}, 5, "Radius of a bend; 0 = a sharp corner."},
        piece.radius_mm);
  visit(FieldInfo{section, "turn_deg", "Turn", "deg", {-3600, 3600}, 5, "Angle of a bend, left positive."},
        piece.turn_deg);
}

template <class S, class Visit>
void each_course_field(S& course, Visit&& visit) {
  const auto field = [&](auto& value, std::string_view key, std::string_view label, std::string_view unit,
                         Range range, double grain, std::string_view meaning, std::size_t most = 1) {
    visit(FieldInfo{"course", key, label, unit, range, grain, meaning, most}, value);
  };
  field(course.line_mm, "line_mm", "Line width", "mm", {1, 1000}, 1, "Width of the line.");
  field(course.closed, "closed", "Closed", "", {}, 0, "Whether the end of the line meets its start.");
  field(course.start_mm, "start_mm", "Start", "mm", {-1e6, 1e6}, 1,
        "Where the pieces begin, x and y; a course of drawn points starts at its first point.");
  field(course.heading_deg, "heading_deg", "Heading", "deg", {-3600, 3600}, 1,
        "Heading with which the pieces begin, counter-clockwise from x.");
  field(course.pieces, "pieces", "Pieces", "", {}, 0, "The centreline as exact straights and bends.",
        most_pieces);
  field(course.points_mm, "points_mm", "Points", "mm", {-1e6, 1e6}, 1,
        "The centreline as drawn points, joined by a curve with continuous curvature.", most_points);
  field(course.corners, "corners", "Corners", "", {0, most_points - 1.0}, 1,
        "Indices of drawn points, counted from 0, that stay sharp.", most_points);
  field(course.gaps_mm, "gaps_mm", "Gaps", "mm", {0, 1e7}, 5,
        "Stretches of the centreline, from and to, where the line is missing.", most_gaps);
}

template <class S, class Visit>
void each_floor_field(S& floor, Visit&& visit) {
  visit(FieldInfo{"floor",
                  "texture_pct",
                  "Texture",
                  "%",
                  {0, 100},
                  0.5,
                  "Standard deviation of the floor's brightness from place to place."},
        floor.texture_pct);
  visit(
      FieldInfo{
          "floor", "texture_mm", "Texture size", "mm", {1, 100000}, 5, "Correlation length of the texture."},
      floor.texture_mm);
  visit(FieldInfo{"floor",
                  "light_pct_per_m",
                  "Light",
                  "%/m",
                  {-1000, 1000},
                  0.5,
                  "Gradient of the light along x and y, in points of reading a metre.",
                  2},
        floor.light_pct_per_m);
  visit(FieldInfo{"floor",
                  "seed",
                  "Texture seed",
                  "",
                  {0, seed_high},
                  1,
                  "Seed of the texture; every stressed drive has the same floor."},
        floor.seed);
}

template <class S, class Visit>
void each_drive_field(S& drive, Visit&& visit) {
  const auto field = [&](auto& value, std::string_view key, std::string_view label, std::string_view unit,
                         Range range, double grain, std::string_view meaning) {
    visit(FieldInfo{"drive", key, label, unit, range, grain, meaning}, value);
  };
  field(drive.laps, "laps", "Laps", "", {1, 1000}, 1, "Laps of a closed course.");
  field(drive.time_limit_s, "time_limit_s", "Time limit", "s", {0, 86400, true}, 1,
        "A drive that has not finished by then ends as time_out.");
  field(drive.lost_mm, "lost_mm", "Lost beyond", "mm", {0, 100000, true}, 1,
        "A deviation beyond this ends the drive as line_lost.");
  field(drive.start_offset_mm, "start_offset_mm", "Start offset", "mm", {-10000, 10000}, 0.5,
        "How far left of the line the vehicle starts.");
  field(drive.start_heading_deg, "start_heading_deg", "Start heading", "deg", {-180, 180}, 0.5,
        "How far left of the line's direction the vehicle points at the start.");
  field(drive.seed, "seed", "Seed", "", {0, seed_high}, 1, "Seed of noise and jitter of the drive.");
}

template <class S, class Visit>
void each_stress_field(S& stress, Visit&& visit) {
  visit(FieldInfo{"stress", "drives", "Drives", "", {1, 1e6}, 1, "Number of stressed drives."},
        stress.drives);
  visit(FieldInfo{"stress", "seed", "Stress seed", "", {0, seed_high}, 1, "Seed of the drawn tolerances."},
        stress.seed);
  visit(FieldInfo{"stress",
                  "spread",
                  "Tolerances",
                  "",
                  {0, 1e6},
                  0.01,
                  "Half-width (uniform) or standard deviation (normal) of a numeric key, in its unit.",
                  most_spreads},
        stress.spread);
}

template <class S, class Visit>
void each_expect_field(S& expect, Visit&& visit) {
  const auto field = [&](auto& value, std::string_view key, std::string_view label, std::string_view unit,
                         Range range, double grain, std::string_view meaning) {
    visit(FieldInfo{"expect", key, label, unit, range, grain, meaning}, value);
  };
  field(expect.outcome, "outcome", "Outcome", "", {}, 0, "How the drive ends.");
  field(expect.time_s_max, "time_s_max", "Time", "s", {0, 86400}, 0.1, "Longest time of the drive.");
  field(expect.deviation_mm_max, "deviation_mm_max", "Deviation", "mm", {0, 100000}, 0.5,
        "Largest deviation anywhere.");
  field(expect.deviation_rms_mm_max, "deviation_rms_mm_max", "Deviation rms", "mm", {0, 100000}, 0.1,
        "Largest root mean square of the deviation.");
  field(expect.saturated_pct_max, "saturated_pct_max", "Saturated", "%", {0, 100}, 0.5,
        "Largest share of the time with steer at its limit.");
  field(expect.reversals_per_s_max, "reversals_per_s_max", "Reversals", "1/s", {0, 100000}, 0.5,
        "Most changes of steering direction a second.");
  field(expect.stress_share_min, "stress_share_min", "Stress share", "", {0, 1}, 0.01,
        "Least share of stressed drives that finish: lower end of the 95 % Wilson interval.");
  field(expect.gain_margin_db_min, "gain_margin_db_min", "Gain margin", "dB", {-200, 200}, 0.5,
        "Least gain margin of the linear loop on the straight.");
}

/// Calls visit(const FieldInfo&, value&) for every field in the order of the scenario text. The values are
/// const when the scenario is.
template <class S, class Visit>
void each_field(S& scenario, Visit&& visit) {
  visit(FieldInfo{"", "title", "Title", "", {}, 0, "A name for the scenario.", 300}, scenario.title);
  visit(FieldInfo{"", "note", "Note", "", {}, 0, "Free text.", 20000}, scenario.note);
  each_vehicle_field(scenario.vehicle, visit);
  each_loop_field(scenario.loop, visit);
  each_sensors_field(scenario.sensors, visit);
  each_controller_field(scenario.controller, visit);
  each_course_field(scenario.course, visit);
  each_floor_field(scenario.floor, visit);
  each_drive_field(scenario.drive, visit);
  each_stress_field(scenario.stress, visit);
  each_expect_field(scenario.expect, visit);
}

}  // namespace lw
