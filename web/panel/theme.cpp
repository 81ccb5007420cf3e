#include "web/panel/theme.h"

#include <algorithm>
#include <cmath>

namespace lw::panel {
namespace {

constexpr ImU32 rgb(unsigned hex) {
  return IM_COL32((hex >> 16) & 255u, (hex >> 8) & 255u, hex & 255u, 255u);
}

constexpr Theme night = {
    rgb(0x0D1519), rgb(0x142026), rgb(0x22323A), rgb(0x2D414B), rgb(0x33474F), rgb(0xEEF4F1), rgb(0xA3B6B8),
    rgb(0xFFA23A), rgb(0x1A1206), rgb(0x6FD69A), rgb(0xFF7B6B), rgb(0xFFD166), rgb(0xB59CFF), rgb(0xFFA23A),
    rgb(0x6CB6FF), rgb(0xF2C14E), rgb(0x6FD69A), rgb(0xEEF4F1), rgb(0x4FD1C5), rgb(0xFF8FB1), rgb(0xFFA23A),
    rgb(0x9FB8FF), rgb(0x24343B), rgb(0x080D10), rgb(0x49606A), rgb(0x2C3E46), rgb(0xF4EBD6), rgb(0x0D1519)};

constexpr Theme day = {
    rgb(0xE3E8E3), rgb(0xF7F9F5), rgb(0xE6ECE7), rgb(0xD6DFD9), rgb(0xBFCAC4), rgb(0x13222A), rgb(0x47595F),
    rgb(0xB54708), rgb(0xFFFFFF), rgb(0x0B6B3A), rgb(0xB3261E), rgb(0x8A5A00), rgb(0x5B3FC4), rgb(0xB54708),
    rgb(0x0B5CAD), rgb(0x8A5A00), rgb(0x0B6B3A), rgb(0x13222A), rgb(0x00736B), rgb(0xB0185A), rgb(0xB54708),
    rgb(0x3949AB), rgb(0xF4F3EC), rgb(0x1B2226), rgb(0x1B2226), rgb(0xE2E3DA), rgb(0x2F5D62), rgb(0xFFFFFF)};

ImVec4 vec(ImU32 colour) { return ImGui::ColorConvertU32ToFloat4(colour); }

ImU32 mixed(ImU32 a, ImU32 b, double share) {
  const auto part = [&](int shift) {
    const double from = (a >> shift) & 255u, to = (b >> shift) & 255u;
    return static_cast<ImU32>(std::lround(from + share * (to - from))) << shift;
  };
  return part(IM_COL32_R_SHIFT) | part(IM_COL32_G_SHIFT) | part(IM_COL32_B_SHIFT) | part(IM_COL32_A_SHIFT);
}

void colour(ImGuiStyle& style, const Theme& t) {
  for (ImVec4& entry : style.Colors) entry = vec(t.raised);
  const auto set = [&](ImGuiCol which, ImU32 c) { style.Colors[which] = vec(c); };
  set(ImGuiCol_Text, t.text);
  set(ImGuiCol_TextDisabled, t.faint);
  set(ImGuiCol_WindowBg, t.ground);
  set(ImGuiCol_ChildBg, 0);
  set(ImGuiCol_PopupBg, t.surface);
  set(ImGuiCol_Border, t.rule);
  set(ImGuiCol_BorderShadow, 0);
  set(ImGuiCol_FrameBg, t.raised);
  set(ImGuiCol_FrameBgHovered, t.hover);
  set(ImGuiCol_FrameBgActive, t.hover);
  set(ImGuiCol_Button, t.raised);
  set(ImGuiCol_ButtonHovered, t.hover);
  set(ImGuiCol_ButtonActive, t.rule);
  set(ImGuiCol_Header, t.raised);
  set(ImGuiCol_HeaderHovered, t.hover);
  set(ImGuiCol_HeaderActive, t.rule);
  set(ImGuiCol_Separator, t.rule);
  set(ImGuiCol_CheckMark, t.accent);
  set(ImGuiCol_SliderGrab, t.accent);
  set(ImGuiCol_SliderGrabActive, t.accent);
  set(ImGuiCol_ScrollbarBg, 0);
  set(ImGuiCol_ScrollbarGrab, t.rule);
  set(ImGuiCol_ScrollbarGrabHovered, t.faint);
  set(ImGuiCol_ScrollbarGrabActive, t.accent);
  set(ImGuiCol_TextSelectedBg, faded(t.accent, 0.4f));
  set(ImGuiCol_NavHighlight, t.accent);
  set(ImGuiCol_ModalWindowDimBg, faded(t.ground, 0.6f));
}

}  // namespace

const Theme& theme(bool dark) { return dark ? night : day; }

ImU32 faded(ImU32 c, float opacity) {
  const auto alpha = static_cast<float>((c >> IM_COL32_A_SHIFT) & 255u) * opacity;
  return (c & ~IM_COL32_A_MASK) | (static_cast<ImU32>(std::lround(alpha)) << IM_COL32_A_SHIFT);
}

ImU32 deviation_colour(bool dark, double share) {
  // From calm to alarm by way of yellow, without the greens that some eyes take for the oranges: any two of
  // the five stay apart for them as well (tests/web/view_colours.cpp).
  constexpr ImU32 night_ramp[] = {rgb(0x2FA3C4), rgb(0x79D8C8), rgb(0xFFEFA8), rgb(0xFFA33A), rgb(0xF23D55)};
  constexpr ImU32 day_ramp[] = {rgb(0x2A8FC4), rgb(0x1F9E94), rgb(0xD9A100), rgb(0xD9541E), rgb(0x96103C)};
  const ImU32* ramp = dark ? night_ramp : day_ramp;
  constexpr int last = 4;
  const double at = std::clamp(share, 0.0, 1.0) * last;
  const int from = std::min(static_cast<int>(at), last - 1);
  return mixed(ramp[from], ramp[from + 1], at - from);
}

void dress(bool dark, float scale, bool touch) {
  ImGuiStyle& style = ImGui::GetStyle();
  style = ImGuiStyle();
  style.WindowPadding = {0, 0};
  style.WindowBorderSize = 0;
  style.ChildBorderSize = 0;
  style.PopupBorderSize = 1;
  style.FramePadding = {10, touch ? 12.0f : 6.0f};
  style.ItemSpacing = {8, touch ? 8.0f : 6.0f};
  style.ItemInnerSpacing = {6, 6};
  style.FrameRounding = 3;
  style.PopupRounding = 4;
  style.ScrollbarRounding = 3;
  style.GrabRounding = 3;
  style.ScrollbarSize = touch ? 16.0f : 12.0f;
  style.ScaleAllSizes(scale);
  style.HoverDelayNormal = 0.45f;
  colour(style, theme(dark));
}

}  // namespace lw::panel
