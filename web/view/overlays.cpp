#include "web/view/overlays.h"

#include <algorithm>
#include <cmath>
#include <cstdio>

#include "web/page/typeface.h"
#include "web/view/layers.h"
#include "web/view/vehicle_drawing.h"

namespace lw::view {
namespace {

float text_size(ImFont* font) { return font->FontSize * ImGui::GetIO().FontGlobalScale; }

ImVec2 measured(ImFont* font, std::string_view text) {
  return font->CalcTextSizeA(text_size(font), 1e9f, 0.0f, text.data(), text.data() + text.size());
}

void write(const Bench& bench, ImFont* font, ImVec2 at, ImU32 colour, std::string_view text) {
  bench.draw.AddText(font, text_size(font), at, colour, text.data(), text.data() + text.size());
}

/// "0 === 15 === 60 mm off the line": the ramp of colours in two halves; `right` is its right edge. Returns
/// its left edge.
float draw_legend(const Bench& bench, float right, float middle) {
  ImFont* font = page::typeface().small;
  const float unit = bench.unit, half = 56 * unit, height = 8 * unit, gap = 7 * unit;
  const double far = bench.desk.good.scenario.drive.lost_mm;
  float x = right;
  const auto word = [&](const char* format, double value) {
    char text[48];
    std::snprintf(text, sizeof text, format, value);
    const ImVec2 size = measured(font, text);
    x -= size.x;
    write(bench, font, {x, middle - 0.5f * size.y}, bench.theme.text, text);
    x -= gap;
  };
  const auto ramp = [&](double from, double to) {
    constexpr int parts = 14;
    const float step = half / parts;
    x -= half;
    for (int i = 0; i < parts; ++i) {
      const float left = x + step * static_cast<float>(i);
      bench.draw.AddRectFilled(
          {left, middle - 0.5f * height}, {left + step + 0.5f, middle + 0.5f * height},
          panel::deviation_colour(bench.desk.dark, from + (to - from) * (i + 0.5) / parts));
    }
    x -= gap;
  };
  const double middle_mm = 0.25 * far;
  word("%.4g mm off the line", far);
  ramp(share_of_scale(middle_mm, far), 1.0);
  word("%.3g", middle_mm);
  ramp(0.0, share_of_scale(middle_mm, far));
  word("%.0f", 0.0);
  return x + gap;
}

/// A bar as long as one square of the grid; `right` is the right edge of its name.
void draw_scale(const Bench& bench, float right, float middle, double grid_mm) {
  ImFont* font = page::typeface().small;
  const float unit = bench.unit;
  const auto width = static_cast<float>(grid_mm * bench.floor.view.scale);
  const std::string text = length_text(grid_mm);
  const ImVec2 size = measured(font, text);
  const float x = right - size.x - 8 * unit - width;
  write(bench, font, {right - size.x, middle - 0.5f * size.y}, bench.theme.text, text);
  const ImU32 colour = bench.theme.text;
  bench.draw.AddRectFilled({x, middle - 1}, {x + width, middle + 1}, colour);
  for (const float end : {x, x + width})
    bench.draw.AddRectFilled({end - 1, middle - 5 * unit}, {end + 1, middle + 5 * unit}, colour);
}

}  // namespace

void draw_bubble(const Bench& bench, Pixel at, std::string_view text, ImU32 colour) {
  ImFont* font = page::typeface().small;
  const float unit = bench.unit, pad = 7 * unit;
  const Frame& frame = bench.floor.view.frame;
  const float wrap = std::min(340 * unit, frame.width - 40);
  const ImVec2 size =
      font->CalcTextSizeA(text_size(font), 1e9f, wrap, text.data(), text.data() + text.size());
  // Above a finger that would hide it, beside a mouse pointer.
  const float lift = bench.pointer.reach > 15 ? 54 * unit : 16 * unit;
  const ImVec2 room{size.x + 2 * pad, size.y + 1.4f * pad};
  float x = bench.pointer.reach > 15 ? at.x - 0.5f * room.x : at.x + 14 * unit;
  float y = at.y - lift - room.y;
  if (y < frame.y + 4) y = at.y + lift;
  x = std::clamp(x, frame.x + 4, std::max(frame.x + 4, frame.x + frame.width - room.x - 4));
  bench.draw.AddRectFilled({x, y}, {x + room.x, y + room.y}, bench.theme.surface, 4 * unit);
  bench.draw.AddRect({x, y}, {x + room.x, y + room.y}, bench.theme.rule, 4 * unit);
  bench.draw.AddText(font, text_size(font), {x + pad, y + 0.7f * pad}, colour, text.data(),
                     text.data() + text.size(), wrap);
}

void draw_footer(const Bench& bench, double grid_mm, std::string_view hint) {
  const Frame& f = bench.floor.view.frame;
  const float pad = 12 * bench.unit;
  // Two lines where the words do not fit beside scale and legend.
  const float beside = 420 * bench.unit + static_cast<float>(grid_mm * bench.floor.view.scale);
  ImFont* font = page::typeface().small;
  const float wrap = std::max(f.width - beside, 120 * bench.unit);
  const ImVec2 size =
      font->CalcTextSizeA(text_size(font), 1e9f, wrap, hint.data(), hint.data() + hint.size());
  const float height = std::max(footer_height * bench.unit, size.y + 10 * bench.unit);
  const float top = f.y + f.height - height, middle = top + 0.5f * height;
  bench.draw.AddRectFilled({f.x, top}, {f.x + f.width, f.y + f.height},
                           panel::faded(bench.theme.ground, 0.82f));
  float left = f.x + f.width - pad;
  if (panel::has_drive(bench.desk)) left = draw_legend(bench, left, middle) - 2.2f * pad;
  draw_scale(bench, left, middle, grid_mm);
  bench.draw.AddText(font, text_size(font), {f.x + pad, middle - 0.5f * size.y}, bench.theme.faint,
                     hint.data(), hint.data() + hint.size(), wrap);
}

float close_up_side(const Frame& frame, float unit) {
  const float side = std::clamp(0.42f * std::min(frame.width, frame.height), 150 * unit, 260 * unit);
  return frame.height < 1.6f * side || frame.width < 2.5f * side ? 0.0f : side;
}

void draw_close_up(const Bench& bench, float top) {
  const Frame& f = bench.floor.view.frame;
  const float side = close_up_side(f, bench.unit);
  if (side == 0.0f) return;
  const Frame frame{f.x + f.width - side - 10 * bench.unit, top, side, side};
  const panel::GoodDrive& good = bench.desk.good;
  const TraceRow row = panel::between_rows(good.trace, bench.desk.playback.cursor);
  const double reach = reach_of_vehicle(good.scenario), ahead = 0.5 * good.scenario.sensors.forward_mm;
  View view;
  view.frame = frame;
  view.scale = 0.5 * side / (1.12 * reach);
  view.centre_x = 1e3 * row.x + ahead * std::cos(row.heading);
  view.centre_y = 1e3 * row.y + ahead * std::sin(row.heading);
  const ImVec2 low{frame.x, frame.y}, high{frame.x + side, frame.y + side};
  bench.draw.PushClipRect(low, high, true);
  bench.draw.AddRectFilled(low, high, bench.theme.bare);
  Mesh mesh;
  mesh.clip = frame;
  const double width = good.scenario.course.line_mm;
  add_tape(mesh, bench.floor.near_shape, view, width, bench.theme);
  if (!bench.floor.path.x.empty())
    add_path(mesh, bench.floor.path, view, good.scenario, bench.desk.dark, 2.0f * bench.unit);
  put(mesh, bench.draw);
  const std::size_t at = panel::row_at(good.trace, bench.desk.playback.cursor);
  const auto sensors = static_cast<std::size_t>(good.trace.sensors);
  draw_vehicle(bench.draw, view, good.scenario, row,
               std::span(good.trace.readings).subspan(at * sensors, sensors), bench.theme, true);
  bench.draw.PopClipRect();
  bench.draw.AddRect(low, high, bench.theme.rule, 0, 0, 2.0f);
}

}  // namespace lw::view
