// The constants of a drive: vehicle, sensors, law and task together, over a lane type.
//
// A Rig may differ from drive to drive of a batch (tolerances); a Wiring may not: it says which features are
// connected, so that a loop period spends nothing on the others.
#pragma once

#include <cstdint>

#include "engine/controller/controller.h"
#include "engine/vehicle/drivetrain.h"
#include "engine/vehicle/sensors.h"

namespace lw {

/// When the loop runs and its commands act.
template <class L>
struct Timing {
  L period;  // s
  L jitter;  // each period = period (1 + jitter U(-1, 1))
  L delay;   // s, from the reading to the command taking effect
};

/// What ends a drive, and where it starts.
template <class L>
struct Task {
  L finish;                           // m of guide point progress
  L lost;                             // m of deviation
  L time_limit;                       // s
  L start_x, start_y, start_heading;  // m, m, rad, of the axle's middle
  L start_progress;                   // m, where the search for the guide point's foot begins
};

template <class L>
struct Rig {
  Drivetrain<L> train;
  Optics<L> optics;
  Law<L> law;
  Timing<L> timing;
  Task<L> task;
};

struct Wiring {
  SensorWiring sensors;
  LawWiring law;
  bool jitter = false, delay = false;
  int queue_length = 0;  // commands that may wait for their delay, a power of two
  std::uint64_t seed = 1;
};

}  // namespace lw
