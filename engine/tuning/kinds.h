// P, PI, PD and PID of one vehicle, side by side: the scenario's own gains with the terms of a kind, or gains
// set afresh for a base speed from the critical gain that the theory gives there.
//
// Afresh, with Kc the critical gain of P alone and Tc its period:
//   P    Kp = Kc / 2                                    half the critical gain (common practice, no source)
//   PI   Kp = Kc / 3.2,  Ti = 2.2 Tc                    Tyreus and Luyben 1992
//   PID  Kp = Kc / 2.2,  Ti = 2.2 Tc,  Td = Tc / 6.3    Tyreus and Luyben 1992; Luyben and Luyben 1997
//   PD   the same without I: Kp = Kc / 2.2, Td = Tc / 6.3
// with Ki = Kp T / Ti and Kd = Kp Td / T per loop. They are careful settings of good standing and no optimum;
// gains that leave the straight loop unstable are refused and not driven.
#pragma once

#include <string_view>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"
#include "engine/theory/loop.h"

namespace lw {

enum class Kind { P, PI, PD, PID };
inline constexpr Kind all_kinds[] = {Kind::P, Kind::PI, Kind::PD, Kind::PID};
inline constexpr std::string_view kind_names[] = {"P", "PI", "PD", "PID"};
constexpr std::string_view name_of(Kind kind) { return kind_names[static_cast<int>(kind)]; }
constexpr bool has_integral(Kind kind) { return kind == Kind::PI || kind == Kind::PID; }
constexpr bool has_derivative(Kind kind) { return kind == Kind::PD || kind == Kind::PID; }

/// The controller without the terms that the kind does not have.
Controller of_kind(Controller controller, Kind kind);

/// Whether the controller has a gain for each term of the kind; without, it is another kind's choice.
bool covers(const Controller& controller, Kind kind);

/// The controller with gains given per loop, in the unit that it uses.
Controller with_loop_gains(Controller controller, const LoopGains& gains, double period);

/// Gains set afresh at a base, as in the essay. Errors: those of linearise(); no
/// critical gain at this base (says why); the gains leave the loop unstable.
Result<Controller> retuned(const Scenario& scenario, Kind kind, double base_pct);

}  // namespace lw
