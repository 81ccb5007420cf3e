#include "engine/scenario/validate.h"

#include <algorithm>
#include <cmath>

#include "engine/scenario/numbers.h"
#include "engine/scenario/value_text.h"

namespace lw {
namespace {

using MaybeFault = std::optional<Fault>;

Fault fault_of(std::string_view section, std::string_view key, std::string value, std::string rule) {
  std::string path(section);
  if (!path.empty()) path += '.';
  path += key;
  return Fault{std::string(section), std::string(key), -1, path, std::move(value), std::move(rule)};
}

Fault fault_of(const FieldInfo& info, std::string value, std::string rule) {
  return fault_of(info.section, info.key, std::move(value), std::move(rule));
}

Fault at_entry(Fault fault, std::size_t index, std::string_view rest = "") {
  fault.entry = static_cast<int>(index);
  fault.path += '[' + std::to_string(index) + ']';
  fault.path += rest;
  return fault;
}

// A tolerance is known by the number it spreads, not by its place in the list.
Fault at_spread(Fault fault, const Spread& spread, std::size_t index) {
  fault.entry = static_cast<int>(index);
  fault.path += '.' + in_quotes(clipped(spread.key));
  return fault;
}

std::string counted(std::size_t count, std::string_view one, std::string_view many) {
  std::string text = std::to_string(count) + ' ';
  return text += count == 1 ? one : many;
}

// ---- every field against its range ----------------------------------------------------------------------

MaybeFault check(const FieldInfo& info, double value) {
  if (!info.range.holds(value)) return fault_of(info, number_text(value), range_text(info));
  if (value != 0 && std::abs(value) < least_magnitude)
    return fault_of(info, number_text(value), "0, or at least 1e-300 in size");
  return {};
}

MaybeFault check(const FieldInfo& info, std::int64_t value) {
  const bool held = value >= static_cast<std::int64_t>(info.range.low) &&
                    value <= static_cast<std::int64_t>(info.range.high);
  if (held) return {};
  return fault_of(info, std::to_string(value), "a whole number " + range_text(info));
}
MaybeFault check(const FieldInfo& info, int value) { return check(info, static_cast<std::int64_t>(value)); }

MaybeFault check(const FieldInfo&, bool) { return {}; }

MaybeFault check(const FieldInfo& info, const std::string& value) {
  if (value.size() > info.most)
    return fault_of(info, counted(value.size(), "byte", "bytes"),
                    "at most " + std::to_string(info.most) + " bytes");
  if (!is_utf8(value)) return fault_of(info, "(bytes)", "text in UTF-8");
  return {};
}

template <NamedEnum E>
MaybeFault check(const FieldInfo& info, E value) {
  if (static_cast<std::size_t>(value) < names_of(value).size()) return {};
  return fault_of(info, std::to_string(static_cast<int>(value)), "one of the named values");
}

template <class T>
MaybeFault check(const FieldInfo& info, const std::optional<T>& value) {
  return value ? check(info, *value) : MaybeFault{};
}

MaybeFault check_both(const FieldInfo& info, double first, double second) {
  if (auto fault = check(info, first)) return at_entry(*fault, 0);
  if (auto fault = check(info, second)) return at_entry(*fault, 1);
  return {};
}
MaybeFault check(const FieldInfo& info, const Point& point) {
  return check_both(info, point.x_mm, point.y_mm);
}
MaybeFault check(const FieldInfo& info, const Stretch& gap) {
  return check_both(info, gap.from_mm, gap.to_mm);
}

MaybeFault check(const FieldInfo& info, const Piece& piece) {
  MaybeFault found;
  each_piece_field(piece, [&](const FieldInfo& part, const auto& value) {
    if (found) return;
    auto inner = check(part, value);
    if (!inner) return;
    found = fault_of(info, inner->value, inner->rule);
    found->path = '.' + std::string(part.key);  // the list puts its own path and index in front
  });
  return found;
}

MaybeFault check(const FieldInfo& info, const std::vector<Spread>& spreads) {
  if (spreads.size() > info.most)
    return fault_of(info, counted(spreads.size(), "entry", "entries"),
                    "at most " + std::to_string(info.most));
  for (std::size_t i = 0; i < spreads.size(); ++i)
    if (auto fault = check(info, spreads[i].amount)) return at_spread(*fault, spreads[i], i);
  return {};
}

template <class T>
MaybeFault check(const FieldInfo& info, const std::vector<T>& values) {
  if (values.size() > info.most)
    return fault_of(info, counted(values.size(), "entry", "entries"), "at most " + std::to_string(info.most));
  for (std::size_t i = 0; i < values.size(); ++i) {
    auto fault = check(info, values[i]);
    if (!fault) continue;
    const std::string own = path_of(info);
    const std::string rest = fault->path.substr(fault->path.find(own) == 0 ? own.size() : 0);
    fault->path = own;
    return at_entry(*fault, i, rest);
  }
  return {};
}

// ---- rules that tie fields together -----------------------------------------------------------------------

MaybeFault check_count(const Sensors& sensors) {
  const std::size_t count = sensors.lateral_mm.size();
  const bool bar = sensors.scheme == Scheme::bar;
  const std::size_t least = bar ? 3 : sensors.scheme == Scheme::pair ? 2 : 1;
  const std::size_t most = bar ? most_sensors : least;
  if (count >= least && count <= most) return {};
  std::string rule = "scheme \"" + std::string(name_of(sensors.scheme)) + "\" takes ";
  rule +=
      bar ? "3 to " + std::to_string(most) + " sensors" : "exactly " + counted(least, "sensor", "sensors");
  return fault_of("sensors", "lateral_mm", counted(count, "offset", "offsets"), rule);
}

MaybeFault check_distinct(const Sensors& sensors) {
  const auto& lateral = sensors.lateral_mm;
  for (std::size_t i = 1; i < lateral.size(); ++i) {
    for (std::size_t k = 0; k < i; ++k) {
      if (lateral[i] != lateral[k]) continue;
      return at_entry(fault_of("sensors", "lateral_mm", number_text(lateral[i]),
                               "the same offset as sensor " + std::to_string(k) + "; each needs its own"),
                      i);
    }
  }
  return {};
}

MaybeFault check_per_sensor(const Sensors& sensors, std::string_view key, std::size_t count) {
  if (count == 0 || count == sensors.lateral_mm.size()) return {};
  return fault_of("sensors", key, counted(count, "entry", "entries"),
                  "one a sensor, and lateral_mm has " + std::to_string(sensors.lateral_mm.size()));
}

MaybeFault check_sensors(const Sensors& sensors) {
  if (auto fault = check_count(sensors)) return fault;
  if (auto fault = check_distinct(sensors)) return fault;
  if (sensors.white_pct - sensors.black_pct < least_contrast_pct)
    return fault_of("sensors", "white_pct", number_text(sensors.white_pct),
                    "at least 1 above black_pct, which is " + number_text(sensors.black_pct));
  if (auto fault = check_per_sensor(sensors, "gain", sensors.gain.size())) return fault;
  return check_per_sensor(sensors, "offset_pct", sensors.offset_pct.size());
}

std::string piece_text(const Piece& piece) {
  std::string text = "{";
  each_piece_field(piece, [&](const FieldInfo& info, const std::optional<double>& value) {
    if (!value) return;
    text += text.size() == 1 ? " " : ", ";
    text += std::string(info.key) + " = " + number_text(*value);
  });
  return text + (text.size() == 1 ? "}" : " }");
}

MaybeFault check_pieces(const Course& course) {
  for (std::size_t i = 0; i < course.pieces.size(); ++i) {
    const Piece& piece = course.pieces[i];
    const bool straight = piece.straight_mm && !piece.radius_mm && !piece.turn_deg;
    const bool bend = !piece.straight_mm && piece.radius_mm && piece.turn_deg;
    if (bend && *piece.turn_deg == 0)
      return at_entry(fault_of("course", "pieces", "0", "a bend turns by some angle, left positive"), i,
                      ".turn_deg");
    if (straight || bend) continue;
    return at_entry(fault_of("course", "pieces", piece_text(piece),
                             "a piece is { straight_mm = ... } or { radius_mm = ..., turn_deg = ... }"),
                    i);
  }
  return {};
}

MaybeFault check_corners(const Course& course) {
  std::vector<bool> taken(course.points_mm.size());
  for (std::size_t i = 0; i < course.corners.size(); ++i) {
    const auto index = static_cast<std::size_t>(course.corners[i]);
    const std::string value = std::to_string(course.corners[i]);
    if (index >= taken.size())
      return at_entry(fault_of("course", "corners", value,
                               "an index of points_mm, which has " + std::to_string(taken.size())),
                      i);
    if (taken[index]) return at_entry(fault_of("course", "corners", value, "named twice"), i);
    taken[index] = true;
  }
  return {};
}

MaybeFault check_course(const Course& course) {
  const std::size_t points = course.points_mm.size();
  if (course.pieces.empty() && points == 0)
    return fault_of("course", "pieces", "[]", "a course needs pieces or points_mm");
  if (!course.pieces.empty() && points > 0)
    return fault_of("course", "points_mm", counted(points, "point", "points"),
                    "a course has either pieces or points_mm, and here are both");
  if (auto fault = check_pieces(course)) return fault;
  const std::size_t least = course.closed ? 3 : 2;
  if (points > 0 && points < least)
    return fault_of("course", "points_mm", counted(points, "point", "points"),
                    course.closed ? "a closed course takes at least 3" : "an open course takes at least 2");
  if (auto fault = check_corners(course)) return fault;
  for (std::size_t i = 0; i < course.gaps_mm.size(); ++i) {
    const Stretch& gap = course.gaps_mm[i];
    if (gap.from_mm < gap.to_mm) continue;
    return at_entry(
        fault_of("course", "gaps_mm", '[' + number_text(gap.from_mm) + ", " + number_text(gap.to_mm) + ']',
                 "a gap is [from, to] with from below to"),
        i);
  }
  return {};
}

MaybeFault check_loops(const Scenario& scenario) {
  const double loops = scenario.drive.time_limit_s * 1000 / scenario.loop.period_ms;
  if (loops <= most_loops) return {};
  return fault_of("drive", "time_limit_s", number_text(scenario.drive.time_limit_s),
                  "with a period of " + number_text(scenario.loop.period_ms) +
                      " ms this is more than 5000000 loops; shorten it or lengthen loop.period_ms");
}

MaybeFault check_spreads(const Scenario& scenario) {
  const auto& spreads = scenario.stress.spread;
  if (spreads.empty()) return {};
  const auto fields = number_fields(scenario);
  for (std::size_t i = 0; i < spreads.size(); ++i) {
    Fault fault = at_spread(fault_of("stress", "spread", "", ""), spreads[i], i);
    const auto is_it = [&](const NumberField& field) { return field.path == spreads[i].key; };
    if (std::none_of(fields.begin(), fields.end(), is_it)) {
      fault.rule = "names no number of the scenario; such a name is \"vehicle.wheel_left_mm\"";
      return fault;
    }
    for (std::size_t k = 0; k < i; ++k) {
      if (spreads[k].key != spreads[i].key) continue;
      fault.rule = "named twice";
      return fault;
    }
  }
  return {};
}

}  // namespace

Error error_of(const Fault& fault, std::string where) {
  std::string what = fault.path;
  if (!fault.value.empty()) what += " = " + fault.value;
  return Error{std::move(where), std::move(what), fault.rule};
}

std::string range_text(const FieldInfo& info) {
  const Range& range = info.range;
  const std::string unit = info.unit.empty() ? "" : ' ' + std::string(info.unit);
  const std::string low = number_text(range.low);
  const std::string high = number_text(range.high);
  if (!range.low_open && !range.high_open) return "between " + low + " and " + high + unit;
  return (range.low_open ? "above " : "at least ") + low + " and " +
         (range.high_open ? "below " : "at most ") + high + unit;
}

std::optional<Fault> find_fault_in(const Scenario& scenario, std::string_view path) {
  MaybeFault found;
  each_field(scenario, [&](const FieldInfo& info, const auto& value) {
    if (!found && path_of(info) == path) found = check(info, value);
  });
  return found;
}

std::optional<Fault> find_fault(const Scenario& scenario) {
  MaybeFault found;
  each_field(scenario, [&](const FieldInfo& info, const auto& value) {
    if (!found) found = check(info, value);
  });
  if (found) return found;
  if (auto fault = check_sensors(scenario.sensors)) return fault;
  if (auto fault = check_course(scenario.course)) return fault;
  if (scenario.floor.light_pct_per_m.size() != 2)
    return fault_of("floor", "light_pct_per_m",
                    counted(scenario.floor.light_pct_per_m.size(), "entry", "entries"),
                    "two entries, along x and y");
  if (auto fault = check_loops(scenario)) return fault;
  return check_spreads(scenario);
}

std::optional<Error> validate(const Scenario& scenario) {
  if (auto fault = find_fault(scenario)) return error_of(*fault);
  return {};
}

}  // namespace lw
