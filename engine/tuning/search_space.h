// The free values of a search as points of the unit box, and back.
//
// Gains of P are spread over their logarithm, since twice as much matters alike anywhere; I, D and filter
// over the square of the coordinate, so that 0 is among them and small values have room; base and places
// evenly.
#pragma once

#include <vector>

#include "engine/numeric/result.h"
#include "engine/tuning/search.h"

namespace lw {

/// One free value with its bounds, in the unit of the scenario's key.
struct Axis {
  Variable variable;
  double low, high;
};

/// Bounds given, or those that search.h describes. Errors: as search_gains() for what is free.
Result<std::vector<Axis>> axes_of(const Scenario& scenario, const std::vector<FreeVariable>& free);

/// To four significant digits.
std::vector<double> values_at(const std::vector<Axis>& axes, const std::vector<double>& point);
/// Held to the box.
std::vector<double> point_at(const std::vector<Axis>& axes, const std::vector<double>& values);

/// The value of one variable in a scenario, and setting it.
double value_of(const Scenario& scenario, Variable variable);
void set_value(Scenario& scenario, Variable variable, double value);

}  // namespace lw
