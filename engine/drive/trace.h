// What a drive leaves behind: one row a loop period, at the time its sensors were read.
//
// Frame: metres, radians, seconds; x right, y up, heading counter-clockwise and unwrapped, left positive. The
// position is the axle's middle; progress and deviation are the guide point's. error is a fraction of full
// scale for one and two sensors and mm for a bar; p, i, d, steer, commands and readings are fractions of full
// scale. The last row is the one at which the drive ended: its sensors were read, its command never acted.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "engine/numeric/result.h"

namespace lw {

struct TraceRow {
  double t = 0.0;           // s
  double x = 0.0, y = 0.0;  // m
  double heading = 0.0;     // rad
  double progress = 0.0;    // m along the centreline, over all laps
  double deviation = 0.0;   // m
  double speed = 0.0;       // m/s, of the axle's middle
  double yaw_rate = 0.0;    // rad/s
  double error = 0.0;
  double p = 0.0, i = 0.0, d = 0.0;
  double steer = 0.0;
  double left = 0.0, right = 0.0;  // commands as held and rounded, before the motor's dead band
};

struct Trace {
  int sensors = 0;
  std::vector<TraceRow> rows;
  std::vector<double> readings;  // rows x sensors, row by row
};

/// One column: its name in CSV (with unit), the member, and what turns the member into that unit.
struct TraceColumn {
  const char* name;
  double TraceRow::*member;
  double scale;
};
inline constexpr double degrees_per_radian = 180.0 / 0x1.921fb54442d18p+1;
/// Every named field, in the order of the CSV columns and of the hash. Readings follow.
inline constexpr TraceColumn trace_columns[] = {
    {"t_s", &TraceRow::t, 1.0},
    {"x_mm", &TraceRow::x, 1e3},
    {"y_mm", &TraceRow::y, 1e3},
    {"heading_deg", &TraceRow::heading, degrees_per_radian},
    {"progress_mm", &TraceRow::progress, 1e3},
    {"deviation_mm", &TraceRow::deviation, 1e3},
    {"speed_mm_s", &TraceRow::speed, 1e3},
    {"yaw_rate_deg_s", &TraceRow::yaw_rate, degrees_per_radian},
    {"error", &TraceRow::error, 1.0},
    {"p", &TraceRow::p, 1.0},
    {"i", &TraceRow::i, 1.0},
    {"d", &TraceRow::d, 1.0},
    {"steer", &TraceRow::steer, 1.0},
    {"left", &TraceRow::left, 1.0},
    {"right", &TraceRow::right, 1.0},
};

/// Carries an FNV-1a 64 on over one row: the bits of every field in column order, then the row's readings; -0
/// counts as 0. `row` < rows.
std::uint64_t hash_row(std::uint64_t hash, const Trace& trace, std::size_t row);

/// FNV-1a 64 over every row.
std::uint64_t trace_hash(const Trace& trace);

/// Where two traces first differ.
struct TraceDifference {
  std::size_t row = 0;
  std::string field;  // column name, reading_N, or "rows" when one trace is longer
  double first = 0.0, second = 0.0;
};
/// True and fills `difference` when the traces differ in any bit.
bool first_difference(const Trace& a, const Trace& b, TraceDifference& difference);

}  // namespace lw
