#include <algorithm>
#include <cmath>
#include <cstring>

#include "engine/scenario/validate.h"
#include "web/panel/grips.h"

namespace lw::panel {
namespace {

constexpr double most_steps_of_whole_range = 500.0;  // a range of up to so many grains is spanned whole
constexpr double fine_share = 0.1;  // with Shift the spot moves this much slower, by finer grains

/// 1, 2 or 5 times a power of ten, at least x.
double round_up(double x) {
  const double power = std::pow(10.0, std::floor(std::log10(x)));
  for (double step : {1.0, 2.0, 5.0}) {
    if (step * power >= x * (1 - 1e-9)) return step * power;
  }
  return 10.0 * power;
}

float place_of(const Span& span, double value, float left, float width) {
  const double share = (value - span.low) / (span.high - span.low);
  return left + static_cast<float>(std::clamp(share, 0.0, 1.0)) * width;
}

struct LinePlace {
  float left, width, y;
};

void draw_line(const Ui& ui, const LinePlace& line, const Span& span, const NumberGrip& grip, double value,
               bool hot, bool active) {
  const Theme& t = ui.colours();
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const float half = ui.px(2.0f), radius = ui.px(active ? 9.0f : 7.5f);
  const float spot = place_of(span, value, line.left, line.width);
  const float origin = place_of(span, std::clamp(0.0, span.low, span.high), line.left, line.width);
  draw.AddRectFilled({line.left, line.y - half}, {line.left + line.width, line.y + half}, t.rule);
  const ImU32 done = hot || active ? t.accent : t.faint;
  draw.AddRectFilled({std::min(origin, spot), line.y - half}, {std::max(origin, spot), line.y + half}, done);
  if (grip.usual >= span.low && grip.usual <= span.high) {
    const float notch = place_of(span, grip.usual, line.left, line.width);
    draw.AddLine({notch, line.y - ui.px(8)}, {notch, line.y + ui.px(8)}, t.rule, ui.px(2));
  }
  draw.AddCircleFilled({spot, line.y}, radius, active ? t.accent : t.text);
  draw.AddCircleFilled({spot, line.y}, radius - ui.px(3.0f), t.surface);
  draw.AddCircleFilled({spot, line.y}, ui.px(2.0f), active || hot ? t.accent : t.text);
}

}  // namespace

double snapped(const Range& range, double grain, double value) {
  if (grain > 0) {
    // Whole multiples by division where 1 / grain is whole, so that 0.3 is the double nearest to 0.3.
    const double per_unit = std::rint(1.0 / grain);
    const bool fraction = grain < 1.0 && std::abs(per_unit * grain - 1.0) < 1e-9;
    value = fraction ? std::rint(value * per_unit) / per_unit : grain * std::rint(value / grain);
  }
  value = std::clamp(value, range.low, range.high);
  if (range.low_open && value <= range.low) value = range.low + grain;
  if (range.high_open && value >= range.high) value = range.high - grain;
  return value + 0.0;
}

Span useful_span(const NumberGrip& grip, double value) {
  const Range& range = grip.range;
  if ((range.high - range.low) / grip.grain <= most_steps_of_whole_range) return {range.low, range.high};
  double high = round_up(std::max({4.0 * std::abs(grip.usual), 100.0 * grip.grain, range.low + 1e-9}));
  while (high < std::abs(value)) high = round_up(high * 1.5);
  const bool both = range.low < 0 && (!grip.one_sided || value < 0);
  return {std::max(range.low, both ? -high : 0.0), std::min(range.high, high)};
}

Moved line_grip(const Ui& ui, const NumberGrip& grip, double value, float width) {
  const std::string id = std::string(grip.path) + " line";
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float height = ui.row_height();
  ImGui::InvisibleButton(id.c_str(), {width, height});
  const bool active = ImGui::IsItemActive(), hot = ImGui::IsItemHovered();
  const float inset = ui.px(10.0f);
  const LinePlace line{at.x + inset, width - 2 * inset, std::round(at.y + height / 2)};
  Moved moved;
  HeldSpot& hold = ui.state.held;
  if (ImGui::IsItemActivated()) {
    const Span span = useful_span(grip, value);
    hold = {ImGui::GetItemID(), span.low, span.high, value};
    begin_edit(ui.desk);
    ui.state.refusal = {};
  }
  const bool holding = active && hold.id == ImGui::GetItemID();
  const Span span = holding ? Span{hold.low, hold.high} : useful_span(grip, value);
  if (holding) {
    const ImGuiIO& io = ImGui::GetIO();
    const double per_px = (span.high - span.low) / line.width;
    if (io.KeyShift) {
      hold.exact += fine_share * per_px * io.MouseDelta.x;
    } else {
      hold.exact = span.low + per_px * (io.MousePos.x - line.left);
    }
    hold.exact = std::clamp(hold.exact, span.low, span.high);
    const double next = snapped(
        grip.range, io.KeyShift ? grip.grain * (grip.whole ? 1.0 : fine_share) : grip.grain, hold.exact);
    const bool pressed_in_place =
        ImGui::IsItemActivated() &&
        std::abs(place_of(span, value, line.left, line.width) - io.MousePos.x) < inset;
    if (next != value && !pressed_in_place && (io.MouseDelta.x != 0 || ImGui::IsItemActivated()))
      moved.value = next;
  }
  moved.done = ImGui::IsItemDeactivated();
  draw_line(ui, line, span, grip, moved.value.value_or(value), hot, active);
  return moved;
}

Moved entry_grip(const Ui& ui, const NumberGrip& grip, double value, float width) {
  const Theme& t = ui.colours();
  const std::string id = "##" + std::string(grip.path);
  const std::string path(grip.path);
  char text[64];
  std::snprintf(text, sizeof text, "%s", shown_number(value, grip.grain).c_str());
  const bool refused = ui.state.refusal.path == path;
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float unit_width = grip.unit.empty() ? 0.0f : measure(ui, Type::small, grip.unit).x + ui.px(6);
  ImGui::SetNextItemWidth(width);
  ImGui::PushStyleVar(ImGuiStyleVar_FramePadding,
                      {ui.px(8), (ui.row_height() - ui.px(4) - ImGui::GetFontSize()) / 2});
  if (refused) ImGui::PushStyleColor(ImGuiCol_FrameBg, faded(t.bad, 0.25f));
  ImGui::SetCursorScreenPos({at.x, at.y + ui.px(2)});
  const bool entered =
      ImGui::InputText(id.c_str(), text, sizeof text,
                       ImGuiInputTextFlags_AutoSelectAll | ImGuiInputTextFlags_EnterReturnsTrue);
  const bool left = ImGui::IsItemDeactivatedAfterEdit();
  const bool editing = ImGui::IsItemActive();
  if (refused) ImGui::PopStyleColor();
  ImGui::PopStyleVar();
  if (!editing && unit_width > 0) {
    const float y = at.y + (ui.row_height() - line_height(ui, Type::small)) / 2;
    put_text(ui, Type::small, {at.x + width - unit_width, y}, t.faint, grip.unit);
  }
  Moved moved;
  if (!entered && !left) return moved;
  const std::optional<double> typed = typed_number(text);
  if (!typed) {
    ui.state.refusal = {path, std::string("\"") + text + "\" is not a number"};
  } else if (grip.whole && *typed != std::rint(*typed)) {
    ui.state.refusal = {path, std::string(text) + " is refused: whole numbers only"};
  } else if (!grip.range.holds(*typed)) {
    FieldInfo info;
    info.range = grip.range;
    info.unit = grip.unit;
    ui.state.refusal = {path, std::string(text) + " is refused: " + range_text(info)};
  } else {
    ui.state.refusal = {};
    if (*typed != value) {
      begin_edit(ui.desk);
      moved.value = *typed;
    }
  }
  moved.done = true;
  return moved;
}

}  // namespace lw::panel
