#include "engine/scenario/numbers.h"

namespace lw {
namespace {

constexpr bool may_be_spread(std::string_view section) {
  return !section.empty() && section != "stress" && section != "expect";
}

// Calls use(path, info, number) for every number, most of which are not the one that is looked for.
void each_number_of(const FieldInfo& info, double& value, auto& use) { use(path_of(info), info, value); }
void each_number_of(const FieldInfo& info, std::vector<double>& values, auto& use) {
  for (std::size_t i = 0; i < values.size(); ++i)
    use(path_of(info) + '[' + std::to_string(i) + ']', info, values[i]);
}
void each_number_of(const FieldInfo& info, Point& point, auto& use) {
  use(path_of(info) + "[0]", info, point.x_mm);
  use(path_of(info) + "[1]", info, point.y_mm);
}
template <class Other>
void each_number_of(const FieldInfo&, Other&, auto&) {}

void each_number(Scenario& scenario, auto&& use) {
  each_field(scenario, [&](const FieldInfo& info, auto& value) {
    if (may_be_spread(info.section)) each_number_of(info, value, use);
  });
}

}  // namespace

void write_out_neutral(Sensors& sensors) {
  if (sensors.gain.empty()) sensors.gain.assign(sensors.lateral_mm.size(), 1.0);
  if (sensors.offset_pct.empty()) sensors.offset_pct.assign(sensors.lateral_mm.size(), 0.0);
}

double* find_number(Scenario& scenario, std::string_view path) {
  if (path.substr(0, 13) == "sensors.gain[" || path.substr(0, 19) == "sensors.offset_pct[")
    write_out_neutral(scenario.sensors);
  double* found = nullptr;
  each_number(scenario, [&](const std::string& name, const FieldInfo&, double& value) {
    if (name == path) found = &value;
  });
  return found;
}

std::optional<double> number_at(const Scenario& scenario, std::string_view path) {
  Scenario copy = scenario;
  const double* found = find_number(copy, path);
  return found ? std::optional<double>(*found) : std::nullopt;
}

std::vector<NumberField> number_fields(const Scenario& scenario) {
  Scenario copy = scenario;
  write_out_neutral(copy.sensors);
  std::vector<NumberField> all;
  each_number(copy, [&](const std::string& path, const FieldInfo& info, double&) {
    all.push_back(NumberField{path, info});
  });
  return all;
}

}  // namespace lw
