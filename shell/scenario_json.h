// Values of a scenario as JSON, by the one list of fields: a program that reads them needs no TOML.
#pragma once

#include <string>
#include <vector>

#include "engine/scenario/fields.h"
#include "shell/answer.h"

namespace lw::shell {

inline Json json_of(double value) { return value; }
inline Json json_of(std::int64_t value) { return value; }
inline Json json_of(int value) { return value; }
inline Json json_of(bool value) { return value; }
inline Json json_of(const std::string& value) { return value; }
template <NamedEnum E>
Json json_of(E value) {
  return name_of(value);
}
inline Json json_of(const Point& point) { return Json::array({point.x_mm, point.y_mm}); }
inline Json json_of(const Stretch& gap) { return Json::array({gap.from_mm, gap.to_mm}); }
/// null = absent.
template <class T>
Json json_of(const std::optional<T>& value) {
  return value ? json_of(*value) : Json(nullptr);
}
/// A piece without the parts it does not have.
inline Json json_of(const Piece& piece) {
  Json json = Json::object();
  each_piece_field(piece, [&](const FieldInfo& info, const std::optional<double>& value) {
    if (value) json[std::string(info.key)] = *value;
  });
  return json;
}
/// {"key": {"normal": amount}, ...}
inline Json json_of(const std::vector<Spread>& spreads) {
  Json json = Json::object();
  for (const Spread& spread : spreads) json[spread.key][std::string(name_of(spread.kind))] = spread.amount;
  return json;
}
template <class T>
Json json_of(const std::vector<T>& values) {
  Json json = Json::array();
  for (const T& value : values) json.push_back(json_of(value));
  return json;
}

/// The sections and keys of the scenario text, every key there; absent values are null.
inline Json json_of(const Scenario& scenario) {
  Json json;
  each_field(scenario, [&](const FieldInfo& info, const auto& value) {
    Json& section = info.section.empty() ? json : json[std::string(info.section)];
    section[std::string(info.key)] = json_of(value);
  });
  return json;
}

}  // namespace lw::shell
