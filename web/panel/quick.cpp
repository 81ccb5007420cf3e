#include "web/panel/quick.h"

#include <cmath>

#include "web/panel/field_rows.h"

namespace lw::panel {
namespace {

constexpr Range mismatch_range{-20.0, 20.0};
constexpr double usual_kp_per_mm = 0.02;  // for a bar of sensors
constexpr double tenth_micrometre = 1e4;  // per mm

double period_s(const Scenario& scenario) { return scenario.loop.period_ms / 1000.0; }

/// The value to six significant digits: what a converted gain is worth as text.
double six_digits(double value) {
  if (value == 0.0 || !std::isfinite(value)) return value;
  const double power = std::pow(10.0, 5.0 - std::floor(std::log10(std::abs(value))));
  return std::rint(value * power) / power;
}

double usual(std::string_view section, std::string_view key) {
  const double* value = usual_field<double>(section, key);
  return value ? *value : 0.0;
}

const char* kp_unit(const Scenario& scenario) { return scenario.sensors.scheme == Scheme::bar ? "/mm" : ""; }

void base_row(Rows& rows) {
  Scenario& s = rows.ui.desk.scenario;
  const NumberRow row{"controller.base_pct",
                      "Base speed",
                      "%",
                      "Command of both wheels when nothing is to be corrected.",
                      {0, 100},
                      1.0,
                      usual("controller", "base_pct")};
  number_row(rows, row, s.controller.base_pct, [&](double v) { s.controller.base_pct = v; });
}

void kp_row(Rows& rows) {
  Scenario& s = rows.ui.desk.scenario;
  const bool bar = s.sensors.scheme == Scheme::bar;
  NumberRow row{
      "controller.kp",
      "Kp",
      kp_unit(s),
      "Steer (1 = full command) per unit of error: full scale for one or two sensors, mm for a bar.",
      {-1e6, 1e6},
      bar ? 0.0005 : 0.005,
      usual("controller", "kp")};
  row.one_sided = true;
  if (bar) {  // the default is meant for an error in shares of full scale
    row.no_default = true;
    row.usual = usual_kp_per_mm;
  }
  number_row(rows, row, s.controller.kp, [&](double v) { s.controller.kp = v; });
}

/// Ki or Kd: the line works in the scenario's unit, the two entries beside it are per loop and per second.
struct TwinRow {
  std::string_view path, label, meaning;
  double grain;
  BothUnits (*read)(const Scenario&);
  void (*write)(Scenario&, double, GainUnit);
  double second_per_loop;  // factor from per loop to per second
};

void twin_row(Rows& rows, const TwinRow& twin) {
  Ui& ui = rows.ui;
  Scenario& s = ui.desk.scenario;
  const BothUnits both = twin.read(s);
  const GainUnit own = s.controller.gains;
  const double value = own == GainUnit::per_loop ? both.per_loop : both.per_second;
  RowPlace place;
  const RowLabel label{twin.path, twin.label, twin.meaning, "0", "", value != 0.0};
  const auto set = [&](GainUnit unit) { return [&twin, &s, unit](double v) { twin.write(s, v, unit); }; };
  if (begin_row(rows, label, place)) {
    begin_edit(ui.desk);
    take(ui, {0.0, true}, set(own));
  }
  const float entry = ui.px(78);
  const float line_width = place.room - 2 * entry - ui.px(10) + ui.px(56);
  ImGui::SetCursorScreenPos({place.control - ui.px(56), place.y});
  const double scale = own == GainUnit::per_loop ? 1.0 : twin.second_per_loop;
  double grain = twin.grain;
  if (own == GainUnit::per_second) grain = std::pow(10.0, std::round(std::log10(twin.grain * scale)));
  NumberGrip grip{twin.path, "", {-1e6, 1e6}, grain};
  grip.one_sided = true;
  take(ui, line_grip(ui, grip, value, line_width), set(own));
  const GainUnit units[] = {GainUnit::per_loop, GainUnit::per_second};
  const double values[] = {both.per_loop, both.per_second};
  for (int i = 0; i < 2; ++i) {
    const std::string path = std::string(twin.path) + (i == 0 ? " per loop" : " per second");
    const float x = place.x + place.width - (i == 0 ? 2 : 1) * entry - (i == 0 ? ui.px(4) : 0);
    ImGui::SetCursorScreenPos({x, place.y});
    const NumberGrip typed{path, "", {-1e6, 1e6}, 0.0};
    take(ui, entry_grip(ui, typed, values[i], entry), set(units[i]));
    if (units[i] == own) {  // what the scenario itself stores
      const float y = place.y + ui.row_height() - ui.px(3);
      ImGui::GetWindowDrawList()->AddRectFilled({x, y}, {x + entry, y + ui.px(2)}, ui.colours().accent);
    }
    if (ui.state.refusal.path == path) ui.state.refusal.path = twin.path;
  }
  end_row(rows, place, twin.path, twin.meaning);
}

/// The heads of the two columns of Ki and Kd.
void twin_heads(const Rows& rows, float y) {
  const Ui& ui = rows.ui;
  const float entry = ui.px(78), right = rows.left + rows.width;
  const char* heads[] = {"per loop", "per second"};
  for (int i = 0; i < 2; ++i) {
    const float x = right - (i == 0 ? 2 : 1) * entry - (i == 0 ? ui.px(4) : 0);
    put_text(ui, Type::small, {x + ui.px(8), y}, ui.colours().faint, heads[i]);
  }
}

}  // namespace

double wheel_mismatch_pct(const Vehicle& vehicle) {
  const double sum = vehicle.wheel_right_mm + vehicle.wheel_left_mm;
  return sum > 0 ? 200.0 * (vehicle.wheel_right_mm - vehicle.wheel_left_mm) / sum : 0.0;
}

void set_wheel_mismatch(Vehicle& vehicle, double mismatch_pct) {
  const double mean = (vehicle.wheel_right_mm + vehicle.wheel_left_mm) / 2;
  const auto rounded = [](double mm) { return std::rint(mm * tenth_micrometre) / tenth_micrometre; };
  vehicle.wheel_right_mm = rounded(mean * (1 + mismatch_pct / 200));
  vehicle.wheel_left_mm = rounded(mean * (1 - mismatch_pct / 200));
}

BothUnits ki_of(const Scenario& s) {
  const double ki = s.controller.ki, t = period_s(s);
  return s.controller.gains == GainUnit::per_loop ? BothUnits{ki, six_digits(ki / t)}
                                                  : BothUnits{six_digits(ki * t), ki};
}

BothUnits kd_of(const Scenario& s) {
  const double kd = s.controller.kd, t = period_s(s);
  return s.controller.gains == GainUnit::per_loop ? BothUnits{kd, six_digits(kd * t)}
                                                  : BothUnits{six_digits(kd / t), kd};
}

void set_ki(Scenario& s, double value, GainUnit unit) {
  const double t = period_s(s);
  if (unit != s.controller.gains) value = six_digits(unit == GainUnit::per_second ? value * t : value / t);
  s.controller.ki = value;
}

void set_kd(Scenario& s, double value, GainUnit unit) {
  const double t = period_s(s);
  if (unit != s.controller.gains) value = six_digits(unit == GainUnit::per_second ? value / t : value * t);
  s.controller.kd = value;
}

void quick_rows(Ui& ui) {
  Scenario& s = ui.desk.scenario;
  Rows rows = begin_rows(ui);
  const double t = period_s(s);
  const bool wide = rows.columns > 1;
  if (wide) {  // the heads stand above the right column
    twin_heads(rows, rows.top);
    rows.top += line_height(ui, Type::small);
    rows.bottom = rows.top;
  }
  base_row(rows);
  if (!wide) kp_row(rows);
  if (!wide) {
    new_line(rows);
    twin_heads(rows, rows.top);
    rows.top += line_height(ui, Type::small);
    rows.bottom = rows.top;
  }
  const bool bar = s.sensors.scheme == Scheme::bar;
  twin_row(rows, {"controller.ki", "Ki", "Integral gain. Underlined: the unit that the scenario stores.",
                  bar ? 0.00005 : 0.0005, ki_of, set_ki, 1 / t});
  if (wide) kp_row(rows);
  twin_row(rows, {"controller.kd", "Kd", "Derivative gain. Underlined: the unit that the scenario stores.",
                  bar ? 0.001 : 0.01, kd_of, set_kd, t});
  const NumberRow noise{"sensors.noise_pct",
                        "Noise",
                        "%",
                        "Standard deviation of a reading, in points of reading.",
                        {0, 100},
                        0.1,
                        usual("sensors", "noise_pct")};
  number_row(rows, noise, s.sensors.noise_pct, [&](double v) { s.sensors.noise_pct = v; });
  const NumberRow mismatch{
      "wheel mismatch",
      "Wheel mismatch",
      "%",
      "How much larger the right wheel is than the left, about their mean. Positive pulls left.",
      mismatch_range,
      0.1,
      0.0};
  const double shown = std::rint(wheel_mismatch_pct(s.vehicle) * 1e4) / 1e4;
  // From the diameters at the beginning of the drag, so that their mean does not drift by rounding.
  number_row(rows, mismatch, shown, [&](double v) {
    Vehicle before = ui.desk.history.open ? ui.desk.history.open->vehicle : s.vehicle;
    set_wheel_mismatch(before, v);
    s.vehicle.wheel_left_mm = before.wheel_left_mm;
    s.vehicle.wheel_right_mm = before.wheel_right_mm;
  });
  end_rows(rows);
}

}  // namespace lw::panel
