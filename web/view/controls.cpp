#include "web/view/controls.h"

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <string>

#include "web/page/typeface.h"

namespace lw::view {
namespace {

ImU32 face_of(const Bench& bench, bool hot, bool down) {
  return down ? bench.theme.rule : hot ? bench.theme.hover : bench.theme.raised;
}

/// The ground of a control, so that words can be read over the floor.
bool pressable(const Bench& bench, const char* id, ImVec2 at, ImVec2 size, bool enabled, bool chosen) {
  ImGui::SetCursorScreenPos(at);
  ImGui::BeginDisabled(!enabled);
  const bool pressed = ImGui::InvisibleButton(id, size);
  ImGui::EndDisabled();
  const bool hot = enabled && ImGui::IsItemHovered(), down = enabled && ImGui::IsItemActive();
  bench.draw.AddRectFilled(at, {at.x + size.x, at.y + size.y},
                           chosen ? bench.theme.accent : face_of(bench, hot, down), 3.0f);
  return pressed;
}

}  // namespace

float Flow::height() const { return bench.unit * (bench.desk.layout.touch ? 42.0f : 30.0f); }

ImVec2 Flow::place(float width) {
  if (x > left && x + width > right) {
    next_line();
  }
  const ImVec2 at{x, y};
  x += width + 6 * bench.unit;
  return at;
}

void Flow::next_line() {
  x = left;
  y += height() + 6 * bench.unit;
}

void Flow::space() {
  if (x > left) x += 10 * bench.unit;
}

float text_width(const Bench&, const char* text) {
  ImFont* font = page::typeface().small;
  const float size = font->FontSize * ImGui::GetIO().FontGlobalScale;
  return font->CalcTextSizeA(size, 1e9f, 0.0f, text).x;
}

void write_middle(const Bench& bench, ImVec2 low, ImVec2 high, ImU32 colour, const char* text) {
  ImFont* font = page::typeface().small;
  const float size = font->FontSize * ImGui::GetIO().FontGlobalScale;
  const ImVec2 extent = font->CalcTextSizeA(size, 1e9f, 0.0f, text);
  const ImVec2 at{std::round(0.5f * (low.x + high.x - extent.x)),
                  std::round(0.5f * (low.y + high.y - extent.y))};
  bench.draw.AddText(font, size, at, colour, text);
}

bool word_button(Flow& flow, const char* word, bool enabled) {
  const Bench& bench = flow.bench;
  const ImVec2 size{text_width(bench, word) + 22 * bench.unit, flow.height()};
  const ImVec2 at = flow.place(size.x);
  const bool pressed = pressable(bench, word, at, size, enabled, false);
  write_middle(bench, at, {at.x + size.x, at.y + size.y}, enabled ? bench.theme.text : bench.theme.faint,
               word);
  return pressed;
}

int word_choice(Flow& flow, const char* name, std::initializer_list<const char*> words, int chosen) {
  const Bench& bench = flow.bench;
  float width = 0;
  for (const char* word : words) width += text_width(bench, word) + 22 * bench.unit;
  ImVec2 at = flow.place(width);
  int taken = -1, index = 0;
  ImGui::PushID(name);
  for (const char* word : words) {
    const ImVec2 size{text_width(bench, word) + 22 * bench.unit, flow.height()};
    if (pressable(bench, word, at, size, true, index == chosen) && index != chosen) taken = index;
    write_middle(bench, at, {at.x + size.x, at.y + size.y},
                 index == chosen ? bench.theme.on_accent : bench.theme.text, word);
    at.x += size.x;
    ++index;
  }
  ImGui::PopID();
  return taken;
}

std::optional<double> number_entry(Flow& flow, const Measure& m, double value) {
  const Bench& bench = flow.bench;
  const float unit = bench.unit, height = flow.height(), side = std::max(height, 28 * unit);
  const float name = text_width(bench, m.name) + 8 * unit, field = 62 * unit;
  const float behind = text_width(bench, m.unit) + 8 * unit;
  const ImVec2 at = flow.place(name + 2 * side + field + behind);
  bench.draw.AddRectFilled({at.x - 4 * unit, at.y}, {at.x + name + 2 * side + field + behind, at.y + height},
                           panel::faded(bench.theme.surface, 0.9f), 3.0f);
  write_middle(bench, at, {at.x + name - 4 * unit, at.y + height}, bench.theme.text, m.name);
  std::optional<double> now;
  ImGui::PushID(m.name);
  const auto stepped = [&](double by) { return m.step * std::rint((value + by * m.step) / m.step); };
  const ImVec2 less{at.x + name, at.y};
  if (pressable(bench, "less", less, {side, height}, true, false)) now = stepped(-1);
  write_middle(bench, less, {less.x + side, less.y + height}, bench.theme.text, "\u2212");
  ImGui::PushFont(page::typeface().small);
  ImGui::SetCursorScreenPos({less.x + side, at.y});
  ImGui::SetNextItemWidth(field);
  const float line = ImGui::GetFontSize();
  ImGui::PushStyleVar(ImGuiStyleVar_FramePadding, {4 * unit, 0.5f * (height - line)});
  ImGui::PushStyleVar(ImGuiStyleVar_FrameRounding, 0.0f);
  double typed = value;
  if (ImGui::InputDouble("##value", &typed, 0, 0, "%.6g", ImGuiInputTextFlags_AutoSelectAll) &&
      typed != value && std::isfinite(typed))
    now = typed;
  ImGui::PopStyleVar(2);
  ImGui::PopFont();
  const ImVec2 more{less.x + side + field, at.y};
  if (pressable(bench, "more", more, {side, height}, true, false)) now = stepped(1);
  write_middle(bench, more, {more.x + side, more.y + height}, bench.theme.text, "+");
  write_middle(bench, {more.x + side, at.y}, {more.x + side + behind, at.y + height}, bench.theme.faint,
               m.unit);
  ImGui::PopID();
  if (now) now = std::clamp(*now, m.low, m.high);
  return now;
}

}  // namespace lw::view
