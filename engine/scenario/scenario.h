// A scenario: everything that fixes a result.
//
// The structs hold each value exactly as the scenario text gives it, in the units of its key, so that text,
// link, screen and struct can be turned into one another without changing a bit. Units other than SI are in
// the name. Defaults stand here and nowhere else; range, unit and meaning of every field are in
// engine/scenario/fields.h.
//
// Frame: x right, y up, heading counter-clockwise from x. Left is positive for lateral offsets and turns.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

namespace lw {

struct Vehicle {
  double track_width_mm = 140.0;  // between the contact points of the two wheels
  double wheel_left_mm = 60.0;    // diameter
  double wheel_right_mm = 60.0;   // diameter
  double top_speed_rpm = 220.0;   // of a wheel, no load, 100 % command, 100 % supply
  double supply_pct = 100.0;      // battery, scales the top speed
  double forward_time_constant_ms = 80.0;
  double turn_time_constant_ms = 60.0;
  double dead_band_pct = 0.0;     // a command smaller than this turns no wheel
  double command_step_pct = 1.0;  // 0 = continuous
  double command_delay_ms = 0.0;
  double grip = 0.0;  // friction coefficient; 0 = never slides
};

struct Loop {
  double period_ms = 5.5;
  double jitter_pct = 0.0;  // each period = period (1 + jitter U(-1, 1))
};

enum class Scheme { edge, pair, bar };
enum class Edge { left, right };

struct Sensors {
  Scheme scheme = Scheme::pair;
  double forward_mm = 70.0;                     // ahead of the axle
  std::vector<double> lateral_mm{10.0, -10.0};  // one a sensor, left positive
  double spot_mm = 8.0;                         // diameter of the disc a sensor averages over
  double black_pct = 10.0;
  double white_pct = 90.0;
  double noise_pct = 0.0;          // standard deviation, points of reading
  double step_pct = 1.0;           // rounding; 0 = continuous
  std::vector<double> gain;        // one a sensor, multiplies (reading - black); empty = all 1
  std::vector<double> offset_pct;  // one a sensor; empty = all 0
  double refresh_ms = 0.0;         // 0 = a fresh reading every loop
  double lag_ms = 0.0;             // time constant of the sensor's low-pass
  Edge edge = Edge::left;          // scheme edge only
  double target_pct = 50.0;        // scheme edge only
};

enum class GainUnit { per_loop, per_second };

struct Controller {
  double base_pct = 40.0;
  double kp =
      0.3;  // steer as fraction of full command, per error as fraction of full scale (per mm for a bar)
  double ki = 0.0;
  double kd = 0.0;
  GainUnit gains = GainUnit::per_loop;
  double derivative_filter_ms = 0.0;
  double integral_limit_pct = 100.0;
  double steer_limit_pct = 100.0;
  double ease = 0.0;  // base falls to base (1 - ease |e|)
};

/// One exact piece of a course: a straight (straight_mm > 0), or a bend of radius_mm through turn_deg (+
/// left). A radius of 0 is a sharp corner.
struct Piece {
  std::optional<double> straight_mm{};
  std::optional<double> radius_mm{};
  std::optional<double> turn_deg{};
};

struct Point {
  double x_mm = 0.0;
  double y_mm = 0.0;
};

/// A stretch of the centreline by arc length, from < to, in mm.
struct Stretch {
  double from_mm = 0.0;
  double to_mm = 0.0;
};

struct Course {
  double line_mm = 20.0;  // width
  bool closed = true;
  Point start_mm;  // with pieces: where they begin. With points: start and heading come from the points
  double heading_deg = 0.0;
  std::vector<Piece> pieces;     // either pieces ...
  std::vector<Point> points_mm;  // ... or drawn points
  std::vector<int> corners;      // indices into points_mm that stay sharp
  std::vector<Stretch> gaps_mm;  // where the line is missing
};

struct FloorLook {
  double texture_pct = 0.0;                       // standard deviation of brightness from place to place
  double texture_mm = 80.0;                       // its correlation length
  std::vector<double> light_pct_per_m{0.0, 0.0};  // gradient along x, y, points of reading
  std::int64_t seed = 1;
};

struct DriveSetting {
  std::int64_t laps = 1;
  double time_limit_s = 60.0;
  double lost_mm = 60.0;
  double start_offset_mm = 0.0;
  double start_heading_deg = 0.0;
  std::int64_t seed = 1;
};

enum class SpreadKind { uniform, normal };

/// One tolerance: the key it varies, and the half-width (uniform) or standard deviation (normal).
struct Spread {
  std::string key;
  SpreadKind kind = SpreadKind::uniform;
  double amount = 0.0;
};

struct Stress {
  std::int64_t drives = 200;
  std::int64_t seed = 1;
  std::vector<Spread> spread;
};

enum class Outcome { finished, line_lost, time_out };

/// What `check` asserts; an absent value is not asserted.
struct Expect {
  std::optional<Outcome> outcome;
  std::optional<double> time_s_max;
  std::optional<double> deviation_mm_max;
  std::optional<double> deviation_rms_mm_max;
  std::optional<double> saturated_pct_max;
  std::optional<double> reversals_per_s_max;
  std::optional<double> stress_share_min;  // the lower end of the 95 % Wilson interval
  std::optional<double> gain_margin_db_min;
};

struct Scenario {
  std::string title;
  std::string note;
  Vehicle vehicle;
  Loop loop;
  Sensors sensors;
  Controller controller;
  Course course;
  FloorLook floor;
  DriveSetting drive;
  Stress stress;
  Expect expect;
};

}  // namespace lw
