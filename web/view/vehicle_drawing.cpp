#include "web/view/vehicle_drawing.h"

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <numbers>
#include <vector>

#include "web/page/typeface.h"

namespace lw::view {
namespace {

// In track widths; a chassis is not part of a scenario.
constexpr double tyre_width = 0.13;
constexpr double plate_half = 0.37, plate_back = 0.42, plate_front = 0.34;
constexpr double gauge_gap = 0.05, gauge_width = 0.07;

/// Drawing in the vehicle's own frame: mm ahead of the axle, mm to the left.
struct Pen {
  ImDrawList& draw;
  const View& view;
  double x, y, cosine, sine;

  ImVec2 at(double ahead, double left) const {
    const Pixel p = to_screen(view, x + ahead * cosine - left * sine, y + ahead * sine + left * cosine);
    return {p.x, p.y};
  }
  void box(double back, double front, double right, double left, ImU32 colour) const {
    draw.AddQuadFilled(at(back, left), at(front, left), at(front, right), at(back, right), colour);
  }
  /// A plate with cut corners.
  void plate(double back, double front, double half, double cut, ImU32 face, ImU32 edge) const {
    const ImVec2 outline[] = {at(back, half - cut),  at(back + cut, half),  at(front - cut, half),
                              at(front, half - cut), at(front, cut - half), at(front - cut, -half),
                              at(back + cut, -half), at(back, cut - half)};
    draw.AddConvexPolyFilled(outline, 8, face);
    draw.AddPolyline(outline, 8, edge, ImDrawFlags_Closed, 1.5f);
  }
};

void draw_wheel(const Pen& pen, const Vehicle& v, bool left, const TraceRow& row, const panel::Theme& t) {
  const double track = v.track_width_mm, side = left ? 1.0 : -1.0;
  const double radius = 0.5 * (left ? v.wheel_left_mm : v.wheel_right_mm), half = 0.5 * tyre_width * track;
  const double middle = 0.5 * side * track;
  pen.box(-radius, radius, middle - half - 0.02 * track, middle + half + 0.02 * track, t.body);
  pen.box(-0.96 * radius, 0.96 * radius, middle - half, middle + half, t.body_edge);
  // The gauge.
  const double inner = middle + side * (half + gauge_gap * track), outer = inner + side * gauge_width * track;
  const double full = std::max(radius, 0.3 * track);
  const double command = std::clamp(left ? row.left : row.right, -1.0, 1.0);
  const double turning = side * -0.5e-3 * track * row.yaw_rate;
  const double top = v.top_speed_rpm / 60.0 * 2.0 * std::numbers::pi * radius * 1e-3 * v.supply_pct / 100.0;
  const double speed = std::clamp((row.speed + turning) / top, -1.1, 1.1);
  const ImU32 colour = left ? t.left : t.right;
  const auto bar = [&](double from, double to, ImU32 c) {
    pen.box(std::min(from, to), std::max(from, to), std::min(inner, outer), std::max(inner, outer), c);
  };
  bar(-full, full, panel::faded(t.body_edge, 0.55f));
  bar(0, command * full, colour);
  const double notch = std::max(0.02 * track, 0.75 / pen.view.scale);
  pen.box(speed * full - notch, speed * full + notch, std::min(inner, outer) - 0.02 * track,
          std::max(inner, outer) + 0.02 * track, t.text);
}

ImU32 grey(double reading) {
  const auto level = static_cast<ImU32>(std::lround(255.0 * std::clamp(reading, 0.0, 1.0)));
  return IM_COL32(level, level, level, 255);
}

void draw_sensors(const Pen& pen, const Sensors& s, std::span<const double> readings, const panel::Theme& t,
                  bool named) {
  if (s.lateral_mm.empty()) return;
  const auto [low, high] = std::minmax_element(s.lateral_mm.begin(), s.lateral_mm.end());
  const double rim = std::max(0.9 * s.spot_mm, 4.0), radius = 0.5 * s.spot_mm;
  pen.box(s.forward_mm - rim, s.forward_mm + rim, *low - rim, *high + rim, t.body);
  ImFont* font = page::typeface().small;
  const float size = font->FontSize * ImGui::GetIO().FontGlobalScale;
  for (std::size_t i = 0; i < s.lateral_mm.size(); ++i) {
    const ImVec2 c = pen.at(s.forward_mm, s.lateral_mm[i]);
    const auto r = static_cast<float>(radius * pen.view.scale);
    pen.draw.AddCircleFilled(c, std::max(r, 1.2f) + std::clamp(0.25f * r, 0.8f, 2.5f), t.accent);
    pen.draw.AddCircleFilled(c, std::max(r, 1.2f), i < readings.size() ? grey(readings[i]) : t.surface);
    if (!named || i >= readings.size() || s.lateral_mm.size() > 4) continue;
    char text[16];
    std::snprintf(text, sizeof text, "%.0f", 100.0 * readings[i]);
    const ImVec2 extent = font->CalcTextSizeA(size, 1e9f, 0.0f, text);
    const double out = s.forward_mm + rim + (0.5 * extent.y + 5.0) / pen.view.scale;
    const bool outer_left = s.lateral_mm[i] > 0.5 * (*low + *high);
    const double aside = s.lateral_mm.size() < 2 ? 0.0 : (outer_left ? 8.0 : -8.0) / pen.view.scale;
    const ImVec2 p = pen.at(out, s.lateral_mm[i] + aside);
    pen.draw.AddRectFilled({p.x - 0.5f * extent.x - 3, p.y - 0.5f * extent.y},
                           {p.x + 0.5f * extent.x + 3, p.y + 0.5f * extent.y}, panel::faded(t.surface, 0.85f),
                           3);
    pen.draw.AddText(font, size, {p.x - 0.5f * extent.x, p.y - 0.5f * extent.y}, t.text, text);
  }
}

}  // namespace

double reach_of_vehicle(const Scenario& scenario) {
  const double track = scenario.vehicle.track_width_mm, sensors = scenario.sensors.forward_mm;
  double wide = 0.62 * track + (gauge_gap + gauge_width) * track;
  for (const double lateral : scenario.sensors.lateral_mm) wide = std::max(wide, std::fabs(lateral));
  return std::max({wide, sensors + scenario.sensors.spot_mm, 0.5 * scenario.vehicle.wheel_left_mm});
}

void draw_vehicle(ImDrawList& draw, const View& view, const Scenario& scenario, const TraceRow& row,
                  std::span<const double> readings, const panel::Theme& theme, bool named) {
  const Pen pen{draw, view, 1e3 * row.x, 1e3 * row.y, std::cos(row.heading), std::sin(row.heading)};
  const double track = scenario.vehicle.track_width_mm, ahead = scenario.sensors.forward_mm;
  pen.box(0, ahead, -0.05 * track, 0.05 * track, theme.body);
  pen.plate(-plate_back * track, plate_front * track, plate_half * track, 0.12 * track, theme.body,
            theme.body_edge);
  // An arrow on the plate: which end is the front can be told at any size.
  draw.AddTriangleFilled(pen.at(0.22 * track, 0), pen.at(-0.08 * track, 0.15 * track),
                         pen.at(-0.08 * track, -0.15 * track), theme.body_edge);
  draw_wheel(pen, scenario.vehicle, true, row, theme);
  draw_wheel(pen, scenario.vehicle, false, row, theme);
  draw_sensors(pen, scenario.sensors, readings, theme, named);
}

}  // namespace lw::view
