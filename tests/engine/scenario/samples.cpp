#include "tests/engine/scenario/samples.h"

#include <algorithm>
#include <string>

#include "engine/scenario/numbers.h"

namespace lw::samples {
namespace {

double draw_in(const Range& range, Dice& dice) {
  const std::size_t kind = dice.below(8);
  if (kind == 0 && !range.low_open) return range.low;
  if (kind == 1 && !range.high_open) return range.high;
  if (kind == 2 && range.holds(-0.0)) return -0.0;
  double value = range.low + dice.unit() * (range.high - range.low);
  if (kind == 3) value = static_cast<double>(static_cast<std::int64_t>(value));
  if (kind == 4) value *= 0x1p-40;
  return range.holds(value) ? value : range.low + 0.5 * (range.high - range.low);
}

struct Draw {
  Dice& dice;

  void operator()(const FieldInfo& info, double& value) { value = draw_in(info.range, dice); }
  void operator()(const FieldInfo& info, std::int64_t& value) {
    value = static_cast<std::int64_t>(draw_in(info.range, dice));
  }
  void operator()(const FieldInfo&, bool& value) { value = dice.coin(); }
  void operator()(const FieldInfo& info, std::string& value) {
    value = random_words(dice, std::min<std::size_t>(info.most / 4, 60));
  }
  template <NamedEnum E>
  void operator()(const FieldInfo&, E& value) {
    value = static_cast<E>(dice.below(names_of(value).size()));
  }
  template <class T>
  void operator()(const FieldInfo& info, std::optional<T>& value) {
    if (dice.coin()) (*this)(info, value.emplace());
  }
  void operator()(const FieldInfo& info, Point& point) {
    (*this)(info, point.x_mm);
    (*this)(info, point.y_mm);
  }
  void operator()(const FieldInfo& info, Stretch& gap) {
    gap.from_mm = draw_in(info.range, dice) / 2;
    gap.to_mm = gap.from_mm + 1 + dice.unit();
  }
  void operator()(const FieldInfo&, Piece& piece) {
    const bool straight = dice.coin();
    each_piece_field(piece, [&](const FieldInfo& info, std::optional<double>& value) {
      if (straight == (info.key == "straight_mm")) (*this)(info, value.emplace());
    });
    if (piece.turn_deg && *piece.turn_deg == 0) piece.turn_deg = 90;
  }
  void operator()(const FieldInfo&, int&) {}     // corners follow from the points, below
  void operator()(const FieldInfo&, Spread&) {}  // spreads follow from the numbers, below
  template <class T>
  void operator()(const FieldInfo& info, std::vector<T>& values) {
    values.resize(1 + dice.below(std::min<std::size_t>(info.most, 12)));
    for (T& value : values) (*this)(info, value);
  }
};

void mend_sensors(Sensors& sensors, Dice& dice) {
  const std::size_t bar = 3 + dice.below(most_sensors - 2);
  const std::size_t count = sensors.scheme == Scheme::edge ? 1 : sensors.scheme == Scheme::pair ? 2 : bar;
  sensors.lateral_mm.resize(count);
  for (std::size_t i = 0; i < count; ++i)
    sensors.lateral_mm[i] = 40.0 - 5.0 * static_cast<double>(i) + dice.unit();
  sensors.gain.resize(dice.coin() ? count : 0);
  sensors.offset_pct.resize(dice.coin() ? count : 0);
  sensors.black_pct *= 0.4;
  sensors.white_pct = 50 + 0.5 * sensors.white_pct;
}

void mend_course(Course& course, Dice& dice) {
  if (dice.coin()) {
    course.points_mm.clear();
    course.corners.clear();
    return;
  }
  course.pieces.clear();
  while (course.points_mm.size() < 3) course.points_mm.push_back(Point{dice.unit(), dice.unit()});
  course.corners.clear();
  for (std::size_t i = 0; i < course.points_mm.size(); ++i)
    if (dice.below(3) == 0) course.corners.push_back(static_cast<int>(i));
}

void mend_stress(Scenario& scenario, Dice& dice) {
  scenario.stress.spread.clear();
  for (const NumberField& field : number_fields(scenario)) {
    if (dice.below(8) != 0) continue;
    const auto kind = dice.coin() ? SpreadKind::uniform : SpreadKind::normal;
    scenario.stress.spread.push_back(Spread{field.path, kind, 3 * dice.unit()});
  }
  std::reverse(scenario.stress.spread.begin(), scenario.stress.spread.end());
}

}  // namespace

std::string random_words(Dice& dice, std::size_t most_characters) {
  const std::string hard[] = {
      "\"",        "'",      "\\",     "\n",      "\r",     "\t",     std::string(1, '\0'),
      "\x7f",      "\x1b",   "#",      "=",       "[",      "]",      "{",
      "}",         "\"\"\"", "'''",    "\\u0041", "a",      "Z",      " ",
      "0",         ".",      "\u00e9", "\u0085",  "\u2028", "\ufeff", "\uffff",
      "\U0001f33f"};
  std::string words;
  for (std::size_t left = dice.below(most_characters + 1); left > 0; --left)
    words += hard[dice.below(std::size(hard))];
  return words;
}

Scenario seedling_cart() {
  Scenario scenario;
  scenario.title = "Seedling cart, aisle end";
  scenario.vehicle.wheel_left_mm = 59.8;
  scenario.course.closed = false;
  Piece aisle;
  aisle.straight_mm = 800;
  Piece end;
  end.radius_mm = 350;
  end.turn_deg = 180;
  scenario.course.pieces = {aisle, end};
  return scenario;
}

Scenario random_scenario(std::uint64_t seed) {
  Dice dice{seed};
  Scenario scenario;
  each_field(scenario, Draw{dice});
  mend_sensors(scenario.sensors, dice);
  mend_course(scenario.course, dice);
  scenario.floor.light_pct_per_m.resize(2);
  if (scenario.drive.time_limit_s * 1000 > 4e6 * scenario.loop.period_ms)
    scenario.drive.time_limit_s = 4e3 * scenario.loop.period_ms;
  mend_stress(scenario, dice);
  return scenario;
}

}  // namespace lw::samples
