// Published settings from the critical gain Ku and critical period Pu of P alone, as data.
//
// All are given in the ideal (non-interacting) form
//   u = Kp (e + 1/Ti integral e dt + Td de/dt),
// Kp as a share of Ku, Ti and Td as shares of Pu. For the law of a vehicle (engine/controller) that is
//   per second   kp = Kp, ki = Kp / Ti, kd = Kp Td
//   per loop     kp = Kp, ki = Kp T / Ti, kd = Kp Td / T            with T the loop period.
#pragma once

#include "engine/scenario/scenario.h"
#include "engine/theory/loop.h"

namespace lw {

struct Rule {
  const char* name;
  const char* source;
  double gain;        // Kp / Ku
  double integral;    // Ti / Pu; 0 = no I
  double derivative;  // Td / Pu; 0 = no D
};

/// Td / Pu of the setting of 1984, which puts the critical point of the Nyquist curve to a phase margin of 45
/// degrees:
///   Kp = Ku cos 45 deg,   2 pi Td / Pu = (tan 45 deg + sqrt(4 / 4 + tan^2 45 deg)) / 2,   Ti = 4 Td.
inline constexpr double lead_of_45_deg = 0.5 * (1.0 + 1.4142135623730951) / 6.283185307179586;

// Figures of the rows marked so were written from memory.
inline constexpr Rule published_rules[] = {
    {"Ziegler-Nichols P", "Ziegler and Nichols 1942, Trans. ASME 64", 0.5, 0.0, 0.0},
    {"Ziegler-Nichols PI", "Ziegler and Nichols 1942, Trans. ASME 64", 0.45, 1.0 / 1.2, 0.0},
    {"Ziegler-Nichols PID", "Ziegler and Nichols 1942, Trans. ASME 64", 0.6, 0.5, 0.125},
    {"Tyreus-Luyben PI", "Tyreus and Luyben 1992, Ind. Eng. Chem. Res. 31", 1.0 / 3.2, 2.2, 0.0},
    {"Tyreus-Luyben PID", "Luyben and Luyben 1997, Essentials of Process Control", 1.0 / 2.2, 2.2, 1.0 / 6.3},
    {"Pessen PID", "Pessen 1954, Trans. ASME 76 (from memory)", 0.7, 0.4, 0.15},
    {"some overshoot PID", "Perry and Chilton 1973, Chemical Engineers' Handbook (from memory)", 0.33, 0.5,
     1.0 / 3.0},
    {"no overshoot PID", "Perry and Chilton 1973, Chemical Engineers' Handbook (from memory)", 0.2, 0.5,
     1.0 / 3.0},
    {"Astrom-Hagglund PID, 45 deg", "Astrom and Hagglund 1984, Automatica 20", 0.7071067811865476,
     4.0 * lead_of_45_deg, lead_of_45_deg},
    {"PD", "common practice, no source", 0.8, 0.0, 0.125},
};

/// Gains per second: ki in 1/s, kd in s, times the unit of kp.
struct SecondGains {
  double kp = 0.0, ki = 0.0, kd = 0.0;
};

/// Ku > 0, in steer per unit of error; Pu > 0, in s.
SecondGains gains_by(const Rule& rule, double critical_gain, double critical_period);

/// period in s, > 0.
LoopGains per_loop(const SecondGains& gains, double period);
SecondGains per_second(const LoopGains& gains, double period);

/// The scenario under other gains, written in the unit the scenario has; filter in s.
Scenario with_gains(Scenario scenario, const LoopGains& gains, double filter);

/// The filter of D (s) a law is tried with: the scenario's, or where that is 0 and D is used a tenth of Td =
/// kd T / kp (Astrom and Hagglund 1995, "PID Controllers": an eighth to a twentieth).
double filter_for(const Scenario& scenario, const LoopGains& gains);

}  // namespace lw
