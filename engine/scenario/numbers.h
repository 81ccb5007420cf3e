// The numbers of a scenario by name, for tolerances, sweeps and the panel.
//
// A path is "section.key" for a plain number ("vehicle.wheel_left_mm"), "section.key[i]" for one entry,
// counted from 0, of a list of numbers ("sensors.gain[1]", "course.start_mm[0]"). Whole numbers (laps,
// drives, seeds) and what `check` expects are not among them: neither can be spread or swept.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "engine/scenario/fields.h"

namespace lw {

/// The number itself, to be read or written in place; nullptr when the path names none. A list of gains or
/// offsets that was left out is first written out with its neutral values. The pointer holds until a list is
/// resized.
double* find_number(Scenario& scenario, std::string_view path);

/// The value of the number; nothing when the path names none.
std::optional<double> number_at(const Scenario& scenario, std::string_view path);

struct NumberField {
  std::string path;
  FieldInfo info;
};

/// All numbers of this scenario, in the order of the text.
std::vector<NumberField> number_fields(const Scenario& scenario);

/// The neutral values that a left-out sensors.gain (1) or sensors.offset_pct (0) stands for, written out.
void write_out_neutral(Sensors& sensors);

}  // namespace lw
