// What P alone has to leave, and what I takes away and costs: in numbers, bend by bend.
//
// Going round a bend takes a steady steer, and under P alone a steady steer takes an error. On a circle of
// radius R with the base c, dead band d, track width b and equal wheels the axle's middle runs on
//   Ra = sqrt((R - deviation)^2 - forward^2)            (left bend; a right one is its mirror)
// and needs steer = b (c - d) / (2 Ra), so that P holds the error
//   e = b (c - d) / (2 Ra kp),   about   b c / (2 R kp)  without dead band.
// On unequal wheels a straight already takes steer = (c - d) (rL - rR) / (rL + rR). Both follow from rolling
// without slip (Siegwart and Nourbakhsh 2004, "Introduction to Autonomous Mobile Robots", chapter 3), and
// here all of it is solved at once: wheels, dead band, limits of wheels and steer, easing, and the sensors
// over the bent line, each at its own place, sqrt((Ra - lateral)^2 + forward^2) from the middle of the bend.
//
// The error that sensors can give ends: past its largest value more deviation gives less. The base at which P
// alone must lose a long bend is the one at which the steer needed is more than the law makes of that error,
// or more than the limits leave. A short bend may be over before the line is lost, and a drive that swings
// when it enters loses it earlier.
//
// I takes the error away, as far as its own limit and the steer's go, in about Ti = kp T / ki; a bend that is
// passed sooner is hardly helped. It costs phase: margins with and without it stand side by side.
#pragma once

#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "engine/drive/plan.h"
#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"
#include "engine/theory/margins.h"

namespace lw {

/// A steady state under P alone.
struct Held {
  double deviation = 0.0;  // m, left positive, of the guide point
  double error = 0.0;      // fraction of full scale, mm for a bar
  double steer = 0.0;      // fraction of full command
  double speed = 0.0;      // m/s of the axle's middle
};

/// What a section of one curvature (1/m, left positive; 0 = straight) makes P do, with the scenario's base or
/// with another. Nothing where P alone cannot hold it. Grip is left out. The scenario is valid.
std::optional<Held> held_by_p(const Scenario& scenario, double curvature);

/// The base (fraction of full command) above which P alone must lose a long section of this curvature; 1 when
/// none up to full command does, 0 when every one does.
double losing_base(const Scenario& scenario, double curvature);

/// All bends of a course that are alike.
struct BendFigures {
  double radius = 0.0;  // m; infinite = straight
  bool left = false;
  double length = 0.0;  // m, of the longest of them
  int count = 0;
  std::optional<Held> held;       // under P alone at the scenario's base
  double rough_error = 0.0;       // b c / (2 R kp), for comparison; 0 on a straight
  double losing_base = 1.0;       // fraction of full command
  double losing_speed = 0.0;      // m/s, without steer
  double duration = 0.0;          // s in the longest of them at the scenario's base
  bool integral_in_time = false;  // the scenario's I has time to work there: duration > Ti
};

struct IntegralFigures {
  double kp = 0.0, ki = 0.0, period = 0.0;  // per loop; s
  std::optional<double> time;               // s, Ti = kp T / ki; nothing without I
  std::vector<BendFigures> bends;           // tightest first, straights last
  Margins without, with;                    // of P (and D), and of the law with the scenario's I
  bool tried =
      false;  // the scenario has no I: `with` is for one of ki = kp T / (2.2 Tc), Tyreus and Luyben's Ti
  double tried_ki = 0.0;  // per loop, of `with`
  std::string words;
};

/// Errors: those of linearise() and make_plan(); a kp that is not above 0.
Result<IntegralFigures> explain_integral(const Scenario& scenario,
                                         std::shared_ptr<const Ground> ground = nullptr);

}  // namespace lw
