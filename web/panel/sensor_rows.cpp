// The sensors as a table: one line a sensor with its place, gain and offset; and the choice of scheme.
#include <algorithm>
#include <cstdio>
#include <cstdlib>

#include "engine/scenario/numbers.h"
#include "web/panel/field_rows.h"

namespace lw::panel {
namespace {

constexpr double pi = 3.14159265358979;

std::vector<double> usual_places(Scheme scheme) {
  switch (scheme) {
    case Scheme::edge:
      return {0.0};
    case Scheme::pair:
      return {10.0, -10.0};
    case Scheme::bar:
      break;
  }
  return {24.0, 12.0, 0.0, -12.0, -24.0};
}

/// Error for each mm beside the line, near it: what turns a gain of one scheme into the same of another. A
/// disc of radius r across a straight edge changes by 2 / (pi r) of its contrast for each unit of length.
double error_per_mm(const Sensors& sensors) {
  if (sensors.scheme == Scheme::bar) return 1.0;
  const double one = (sensors.white_pct - sensors.black_pct) / 100.0 * 2.0 / (pi * sensors.spot_mm / 2.0);
  return sensors.scheme == Scheme::pair ? 2.0 * one : one;
}

double three_digits(double value) {
  char text[32];
  std::snprintf(text, sizeof text, "%.3g", value);
  return std::strtod(text, nullptr);
}

void set_scheme(Scenario& s, Scheme scheme) {
  const double before = error_per_mm(s.sensors);
  s.sensors.scheme = scheme;
  s.sensors.lateral_mm = usual_places(scheme);
  s.sensors.gain.clear();
  s.sensors.offset_pct.clear();
  const double factor = before / error_per_mm(s.sensors);
  for (double* gain : {&s.controller.kp, &s.controller.ki, &s.controller.kd})
    *gain = three_digits(*gain * factor);
}

void add_sensor(Sensors& sensors) {
  auto& places = sensors.lateral_mm;
  const double pitch = places.size() > 1 ? std::max(1.0, places[places.size() - 2] - places.back()) : 10.0;
  places.push_back(places.empty() ? 0.0 : places.back() - pitch);
  if (!sensors.gain.empty()) sensors.gain.push_back(1.0);
  if (!sensors.offset_pct.empty()) sensors.offset_pct.push_back(0.0);
}

void remove_sensor(Sensors& sensors, std::size_t index) {
  for (auto* list : {&sensors.lateral_mm, &sensors.gain, &sensors.offset_pct}) {
    if (index < list->size()) list->erase(list->begin() + static_cast<std::ptrdiff_t>(index));
  }
}

struct Column {
  const char* key;
  const char* head;
  const char* unit;
  double neutral;
  std::vector<double> Sensors::*list;
};
constexpr Column columns[] = {{"lateral_mm", "Left of middle", "mm", 0.0, &Sensors::lateral_mm},
                              {"gain", "Gain", "", 1.0, &Sensors::gain},
                              {"offset_pct", "Offset", "%", 0.0, &Sensors::offset_pct}};

FieldInfo info_of(const char* key) {
  FieldInfo found;
  each_sensors_field(static_cast<const Sensors&>(Sensors{}), [&](const FieldInfo& info, const auto&) {
    if (info.key == key) found = info;
  });
  return found;
}

void cell(Ui& ui, const Column& column, std::size_t i, float width) {
  Sensors& sensors = ui.desk.scenario.sensors;
  const FieldInfo info = info_of(column.key);
  const std::string path = path_of(info) + "[" + std::to_string(i) + "]";
  const std::vector<double>& list = sensors.*column.list;
  const double value = i < list.size() ? list[i] : column.neutral;
  const NumberGrip grip{path, column.unit, info.range, info.grain, column.neutral};
  take(ui, entry_grip(ui, grip, value, width), [&](double v) {
    if (list.empty()) write_out_neutral(sensors);
    (sensors.*column.list)[i] = v;
  });
  tip(ui, info.meaning);
}

}  // namespace

void scheme_row(Rows& rows, const FieldInfo& info) {
  Ui& ui = rows.ui;
  const std::string path = path_of(info);
  RowPlace place;
  RowLabel label;
  label.path = path;
  label.label = info.label;
  label.meaning = info.meaning;
  begin_row(rows, label, place);
  const int picked =
      choice(ui, path, scheme_names, static_cast<int>(ui.desk.scenario.sensors.scheme), place.room);
  if (picked >= 0) {
    edit(ui.desk, [&](Scenario& s) { set_scheme(s, static_cast<Scheme>(picked)); });
    say(ui.desk,
        "Sensors placed anew; Kp, Ki and Kd converted to the same steer for each mm beside the line.");
  }
  end_row(rows, place, path, info.meaning);
}

void sensor_table(Rows& rows) {
  Ui& ui = rows.ui;
  Sensors& sensors = ui.desk.scenario.sensors;
  new_line(rows);
  const float full = std::min(rows.width, ui.px(460)), number = ui.px(28), button_width = ui.row_height();
  const float each = (full - number - button_width - 3 * ui.px(5)) / 3;
  float y = rows.top + ui.px(4);
  for (std::size_t c = 0; c < std::size(columns); ++c) {
    const float x = rows.left + number + static_cast<float>(c) * (each + ui.px(5));
    put_text(ui, Type::small, {x + ui.px(8), y}, ui.colours().faint, columns[c].head);
  }
  y += line_height(ui, Type::small) + ui.px(2);
  std::optional<std::size_t> removed;
  const bool bar = sensors.scheme == Scheme::bar;
  for (std::size_t i = 0; i < sensors.lateral_mm.size(); ++i) {
    const float text_y = y + (ui.row_height() - line_height(ui, Type::text)) / 2;
    put_text(ui, Type::text, {rows.left + ui.px(11), text_y}, ui.colours().faint, std::to_string(i));
    for (std::size_t c = 0; c < std::size(columns); ++c) {
      ImGui::SetCursorScreenPos({rows.left + number + static_cast<float>(c) * (each + ui.px(5)), y});
      cell(ui, columns[c], i, each);
    }
    if (bar && sensors.lateral_mm.size() > 3) {
      ImGui::SetCursorScreenPos({rows.left + full - button_width, y});
      const std::string id = "Remove sensor " + std::to_string(i);
      if (icon_button(ui, id.c_str(), Icon::cross)) removed = i;
    }
    y += ui.row_height();
  }
  if (bar && sensors.lateral_mm.size() < most_sensors) {
    ImGui::SetCursorScreenPos({rows.left + number, y + ui.px(2)});
    if (button(ui, "Add a sensor")) edit(ui.desk, [](Scenario& s) { add_sensor(s.sensors); });
    y += ui.row_height() + ui.px(4);
  }
  if (removed) edit(ui.desk, [&](Scenario& s) { remove_sensor(s.sensors, *removed); });
  RowPlace place{rows.left, y - ui.row_height(), rows.width, 0, 0, 0};
  for (const char* path : {"sensors.lateral_mm", "sensors.gain", "sensors.offset_pct"}) {
    end_row(rows, place, path);
    place.y = rows.bottom - ui.row_height();
  }
  new_line(rows);
}

}  // namespace lw::panel
