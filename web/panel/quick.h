// What is turned most often, always at hand above the steps: base speed, Kp, Ki and Kd in both units, sensor
// noise, and how unequal the wheels are.
#pragma once

#include "web/panel/rows.h"

namespace lw::panel {

void quick_rows(Ui& ui);

/// How much larger the right wheel is than the left, in % of their mean diameter; positive pulls to the left.
double wheel_mismatch_pct(const Vehicle& vehicle);

/// Diameters with that difference and the mean of `vehicle`, rounded to 0.1 micrometre.
void set_wheel_mismatch(Vehicle& vehicle, double mismatch_pct);

/// Gains in both units. Per second: ki / period and kd * period (design: gains per loop act once a period).
struct BothUnits {
  double per_loop, per_second;
};
BothUnits ki_of(const Scenario& scenario);
BothUnits kd_of(const Scenario& scenario);

/// Stores a gain that was given in `unit`, converted to the unit that the scenario uses.
void set_ki(Scenario& scenario, double value, GainUnit unit);
void set_kd(Scenario& scenario, double value, GainUnit unit);

}  // namespace lw::panel
