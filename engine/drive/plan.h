// A scenario made ready to run: everything in SI units, the ground built, constants worked out.
//
// The ground (centreline and floor raster) costs milliseconds, the rest microseconds; so a screen that
// changes a gain keeps its ground. ground_key says when it may.
#pragma once

#include <cstdint>
#include <memory>

#include "engine/course/centreline.h"
#include "engine/course/floor.h"
#include "engine/drive/rig.h"
#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw {

struct Ground {
  Centreline line;
  Floor floor;
};

/// A hash of all that make_ground reads: two scenarios with the same key have the same ground.
std::uint64_t ground_key(const Scenario& scenario);

/// Builds centreline and floor. Errors: those of make_centreline and make_floor.
Result<std::shared_ptr<const Ground>> make_ground(const Scenario& scenario);

/// The parts of a rig that need no ground, in SI units: what the theory of the loop shares with the drive.
Drivetrain<double> drivetrain_of(const Vehicle& vehicle);
Optics<double> optics_of(const Sensors& sensors, const FloorLook& look);
Law<double> law_of(const Controller& controller, const Sensors& sensors, const Vehicle& vehicle);
/// What of a scenario is connected.
Wiring wiring_of(const Scenario& scenario);

struct Plan {
  Rig<double> rig;                       // constants of this drive
  Wiring wiring;                         // what is connected: the same for every drive of a batch
  std::shared_ptr<const Ground> ground;  // never null
};

/// Compiles a scenario. `ground` may be one built for a scenario with the same ground_key; when null it is
/// built here. Errors: those of validate and make_ground.
Result<Plan> make_plan(const Scenario& scenario, std::shared_ptr<const Ground> ground = nullptr);

}  // namespace lw
