#include <imgui_internal.h>

#include <cmath>
#include <cstring>

#include "web/panel/grips.h"

namespace lw::panel {
namespace {

using Draw = ImDrawList;

void triangle(Draw& draw, ImVec2 c, float r, bool to_right, ImU32 colour) {
  const float s = to_right ? 1.0f : -1.0f;
  const ImVec2 tip{c.x + s * r, c.y}, top{c.x - s * 0.6f * r, c.y - r}, low{c.x - s * 0.6f * r, c.y + r};
  if (to_right) {
    draw.AddTriangleFilled(top, tip, low, colour);
  } else {
    draw.AddTriangleFilled(top, low, tip, colour);
  }
}

void bent_arrow(Draw& draw, ImVec2 c, float r, bool to_left, ImU32 colour) {
  const float s = to_left ? -1.0f : 1.0f, thick = r * 0.28f;
  draw.PathLineTo({c.x + s * r, c.y - 0.35f * r});
  draw.PathLineTo({c.x - s * 0.3f * r, c.y - 0.35f * r});
  draw.PathBezierCubicCurveTo({c.x - s * 1.2f * r, c.y - 0.35f * r}, {c.x - s * 1.2f * r, c.y + 0.8f * r},
                              {c.x - s * 0.3f * r, c.y + 0.8f * r});
  draw.PathLineTo({c.x + s * 0.3f * r, c.y + 0.8f * r});
  draw.PathStroke(colour, 0, thick);
  draw.PathLineTo({c.x + s * 0.45f * r, c.y - 0.9f * r});
  draw.PathLineTo({c.x + s * r, c.y - 0.35f * r});
  draw.PathLineTo({c.x + s * 0.45f * r, c.y + 0.2f * r});
  draw.PathStroke(colour, 0, thick);
}

void bars(Draw& draw, ImVec2 c, float r, ImU32 colour) {
  for (float side : {-1.0f, 1.0f}) {
    draw.AddRectFilled({c.x + side * 0.5f * r - 0.25f * r, c.y - r},
                       {c.x + side * 0.5f * r + 0.25f * r, c.y + r}, colour);
  }
}

void stroke(Draw& draw, ImVec2 a, ImVec2 b, float r, ImU32 colour) { draw.AddLine(a, b, colour, 0.28f * r); }

void sun(Draw& draw, ImVec2 c, float r, ImU32 colour) {
  draw.AddCircleFilled(c, 0.5f * r, colour);
  for (int ray = 0; ray < 8; ++ray) {
    const float a = static_cast<float>(ray) * 0.785398f, x = std::cos(a), y = std::sin(a);
    stroke(draw, {c.x + 0.75f * r * x, c.y + 0.75f * r * y}, {c.x + 1.1f * r * x, c.y + 1.1f * r * y}, r,
           colour);
  }
}

void chevron(Draw& draw, ImVec2 c, float r, bool down, ImU32 colour) {
  const float s = down ? 1.0f : -1.0f;
  draw.PathLineTo({c.x - r, c.y - s * 0.4f * r});
  draw.PathLineTo({c.x, c.y + s * 0.6f * r});
  draw.PathLineTo({c.x + r, c.y - s * 0.4f * r});
  draw.PathStroke(colour, 0, 0.3f * r);
}

void draw_icon(Draw& draw, Icon icon, ImVec2 c, float r, ImU32 colour, ImU32 behind) {
  switch (icon) {
    case Icon::undo:
      return bent_arrow(draw, c, r, true, colour);
    case Icon::redo:
      return bent_arrow(draw, c, r, false, colour);
    case Icon::play:
      return triangle(draw, c, r, true, colour);
    case Icon::pause:
      return bars(draw, c, r, colour);
    case Icon::forward:
      triangle(draw, {c.x - 0.3f * r, c.y}, 0.8f * r, true, colour);
      return stroke(draw, {c.x + 0.8f * r, c.y - 0.8f * r}, {c.x + 0.8f * r, c.y + 0.8f * r}, r, colour);
    case Icon::back:
      triangle(draw, {c.x + 0.3f * r, c.y}, 0.8f * r, false, colour);
      return stroke(draw, {c.x - 0.8f * r, c.y - 0.8f * r}, {c.x - 0.8f * r, c.y + 0.8f * r}, r, colour);
    case Icon::start:
      triangle(draw, {c.x - 0.2f * r, c.y}, 0.7f * r, false, colour);
      triangle(draw, {c.x + 0.8f * r, c.y}, 0.7f * r, false, colour);
      return stroke(draw, {c.x - 1.1f * r, c.y - 0.8f * r}, {c.x - 1.1f * r, c.y + 0.8f * r}, r, colour);
    case Icon::plus:
      stroke(draw, {c.x, c.y - 0.8f * r}, {c.x, c.y + 0.8f * r}, r, colour);
      [[fallthrough]];
    case Icon::minus:
      return stroke(draw, {c.x - 0.8f * r, c.y}, {c.x + 0.8f * r, c.y}, r, colour);
    case Icon::cross:
      stroke(draw, {c.x - 0.7f * r, c.y - 0.7f * r}, {c.x + 0.7f * r, c.y + 0.7f * r}, r, colour);
      return stroke(draw, {c.x - 0.7f * r, c.y + 0.7f * r}, {c.x + 0.7f * r, c.y - 0.7f * r}, r, colour);
    case Icon::sun:
      return sun(draw, c, r, colour);
    case Icon::moon:
      draw.AddCircleFilled(c, 0.9f * r, colour);
      return draw.AddCircleFilled({c.x + 0.45f * r, c.y - 0.3f * r}, 0.75f * r, behind);
    case Icon::fold:
      return chevron(draw, c, 0.8f * r, true, colour);
    case Icon::unfold:
      return chevron(draw, c, 0.8f * r, false, colour);
  }
}

struct Pressed {
  bool pressed;
  ImVec2 at, size;
  ImU32 face;
};

/// The pressable ground that all buttons share.
Pressed press(const Ui& ui, const char* label, ImVec2 size, Weight weight, bool enabled) {
  const Theme& t = ui.colours();
  const ImVec2 at = ImGui::GetCursorScreenPos();
  ImGui::BeginDisabled(!enabled);
  const bool pressed = ImGui::InvisibleButton(label, size);
  ImGui::EndDisabled();
  const bool hot = enabled && ImGui::IsItemHovered(), down = enabled && ImGui::IsItemActive();
  ImU32 face = weight == Weight::quiet ? 0 : t.raised;
  if (hot) face = t.hover;
  if (down) face = t.rule;
  if (weight == Weight::strong) face = faded(t.accent, down ? 0.75f : hot ? 0.88f : 1.0f);
  if (!enabled && weight != Weight::quiet) face = faded(t.raised, 0.5f);
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  draw.AddRectFilled(at, {at.x + size.x, at.y + size.y}, face, ui.px(3));
  if (ImGui::GetCurrentContext()->NavId == ImGui::GetItemID() && ImGui::GetIO().NavVisible) {
    draw.AddRect(at, {at.x + size.x, at.y + size.y}, t.accent, ui.px(3), 0, ui.px(2));
  }
  return {pressed, at, size, face};
}

/// What a reader sees of a label: without what stands behind ##.
std::string_view visible(const char* label) {
  const char* hidden = std::strstr(label, "##");
  return hidden ? std::string_view(label, static_cast<std::size_t>(hidden - label)) : std::string_view(label);
}

}  // namespace

bool button(const Ui& ui, const char* label, Weight weight, float width, bool enabled) {
  const Theme& t = ui.colours();
  const std::string_view text = visible(label);
  const ImVec2 letters = measure(ui, Type::text, text);
  const ImVec2 size{width > 0 ? width : letters.x + ui.px(22), ui.row_height()};
  const Pressed p = press(ui, label, size, weight, enabled);
  ImU32 colour = weight == Weight::strong && enabled ? t.on_accent : t.text;
  if (!enabled) colour = faded(t.faint, 0.6f);
  put_text(ui, Type::text, {p.at.x + (size.x - letters.x) / 2, p.at.y + (size.y - letters.y) / 2}, colour,
           text);
  return p.pressed;
}

bool icon_button(const Ui& ui, const char* label, Icon icon, bool enabled, float width) {
  const Theme& t = ui.colours();
  const ImVec2 size{width > 0 ? width : ui.row_height(), ui.row_height()};
  const Pressed p = press(ui, label, size, Weight::plain, enabled);
  const ImU32 colour = enabled ? t.text : faded(t.faint, 0.5f);
  const ImVec2 middle{std::round(p.at.x + size.x / 2), std::round(p.at.y + size.y / 2)};
  draw_icon(*ImGui::GetWindowDrawList(), icon, middle, ui.px(7), colour, p.face);
  if (enabled) tip(ui, visible(label));
  return p.pressed;
}

int choice(const Ui& ui, std::string_view path, std::span<const std::string_view> names, int chosen,
           float width) {
  const Theme& t = ui.colours();
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float height = ui.row_height() - ui.px(4), top = at.y + ui.px(2);
  const float piece = width / static_cast<float>(names.size());
  draw.AddRectFilled({at.x, top}, {at.x + width, top + height}, t.raised, ui.px(3));
  int picked = -1;
  Type type = Type::text;
  for (std::string_view name : names) {
    if (measure(ui, type, name).x > piece - ui.px(6)) type = Type::small;
  }
  for (std::size_t i = 0; i < names.size(); ++i) {
    const float x = at.x + piece * static_cast<float>(i);
    std::string shown(names[i]);
    for (char& c : shown) c = c == '_' ? ' ' : c;
    const std::string id = std::string(path) + " = " + std::string(names[i]);
    ImGui::SetCursorScreenPos({x, at.y});
    if (ImGui::InvisibleButton(id.c_str(), {piece, ui.row_height()})) picked = static_cast<int>(i);
    const bool on = static_cast<int>(i) == chosen;
    const ImVec2 low{x + ui.px(2), top + ui.px(2)}, high{x + piece - ui.px(2), top + height - ui.px(2)};
    if (on || ImGui::IsItemHovered()) draw.AddRectFilled(low, high, on ? t.accent : t.hover, ui.px(2));
    const std::string fit = fitted(ui, type, shown, piece - ui.px(4));
    const ImVec2 letters = measure(ui, type, fit);
    put_text(ui, type, {x + (piece - letters.x) / 2, top + (height - letters.y) / 2},
             on ? t.on_accent : t.text, fit);
  }
  ImGui::SetCursorScreenPos(at);
  ImGui::Dummy({width, ui.row_height()});
  return picked == chosen ? -1 : picked;
}

std::optional<std::string> text_entry(const Ui& ui, const char* label, const std::string& value, float width,
                                      std::size_t most, const char* hint) {
  std::string text = value;
  text.resize(most + 1, '\0');
  ImGui::SetNextItemWidth(width);
  ImGui::PushStyleVar(ImGuiStyleVar_FramePadding, {ui.px(8), (ui.row_height() - ImGui::GetFontSize()) / 2});
  const bool entered =
      ImGui::InputTextWithHint(label, hint, text.data(), text.size(), ImGuiInputTextFlags_EnterReturnsTrue);
  const bool left = ImGui::IsItemDeactivatedAfterEdit();
  ImGui::PopStyleVar();
  if (!entered && !left) return std::nullopt;
  text.resize(std::strlen(text.c_str()));
  return text;
}

void tip(const Ui& ui, std::string_view text) {
  if (!ImGui::IsItemHovered(ImGuiHoveredFlags_DelayNormal | ImGuiHoveredFlags_NoSharedDelay)) return;
  if (ui.desk.layout.touch) return;
  ImGui::PushStyleVar(ImGuiStyleVar_WindowPadding, {ui.px(10), ui.px(8)});
  ImGui::PushStyleColor(ImGuiCol_Border, ui.colours().faint);
  if (ImGui::BeginTooltip()) {
    ImGui::PushTextWrapPos(ui.px(340));
    ImGui::TextUnformatted(text.data(), text.data() + text.size());
    ImGui::PopTextWrapPos();
    ImGui::EndTooltip();
  }
  ImGui::PopStyleColor();
  ImGui::PopStyleVar();
}

void title(const Ui& ui, const char* text) {
  const ImVec2 at = ImGui::GetCursorScreenPos();
  const float height = line_height(ui, Type::strong), top = ui.px(6);
  const float width = put_text(ui, Type::strong, {at.x, at.y + top}, ui.colours().text, text);
  const float y = std::round(at.y + top + height / 2) + 1, right = at.x + ImGui::GetContentRegionAvail().x;
  ImGui::GetWindowDrawList()->AddLine({at.x + width + ui.px(10), y}, {right, y}, ui.colours().rule, 1.0f);
  ImGui::Dummy({width, top + height + ui.px(2)});
}

void paragraph(const Ui& ui, std::string_view text, ImU32 colour, Type type) {
  const float width = ImGui::GetContentRegionAvail().x;
  const ImVec2 at = ImGui::GetCursorScreenPos();
  put_text(ui, type, at, colour, text, width);
  ImGui::Dummy(measure(ui, type, text, width));
}

}  // namespace lw::panel
