// Rows for the fields of a scenario, made from the one list of fields (engine/scenario/fields.h): a field
// that is added there gets its row here by itself. Only fields that belong together get rows of their own
// shape: the sensors, the course's lists, tolerances and expectations.
#pragma once

#include "web/panel/rows.h"

namespace lw::panel {

/// The fields that stay at hand above all steps and are left out of them (quick.h).
bool is_quick(const FieldInfo& info);

/// Name and help of a field's row; `path` as in the scenario ("vehicle.wheel_left_mm").
RowLabel label_of(const FieldInfo& info, const std::string& path);

/// Rows for all fields of one section ("vehicle"), in the order of the list.
void section_rows(Rows& rows, std::string_view section);

/// The default of a field, by type and name; null when there is no such field of that type.
template <class T>
const T* usual_field(std::string_view section, std::string_view key);

// Rows with a shape of their own, called by section_rows.
void sensor_table(Rows& rows);                          // lateral_mm, gain, offset_pct
void scheme_row(Rows& rows, const FieldInfo& info);     // brings fitting sensors along
void gain_unit_row(Rows& rows, const FieldInfo& info);  // converts ki and kd along
void piece_rows(Rows& rows, const FieldInfo& info);
void point_rows(Rows& rows, const FieldInfo& info);
void corner_row(Rows& rows, const FieldInfo& info);
void gap_rows(Rows& rows, const FieldInfo& info);
void spread_rows(Rows& rows, const FieldInfo& info);
void expect_row(Rows& rows, const FieldInfo& info, std::optional<double>& value);
void expect_row(Rows& rows, const FieldInfo& info, std::optional<Outcome>& value);

}  // namespace lw::panel
