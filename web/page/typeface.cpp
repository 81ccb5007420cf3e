#include "web/page/typeface.h"

#include <imgui.h>

#include <algorithm>
#include <cmath>

namespace lw::page {

// web/build/embed.cmake
extern const unsigned char typeface_regular[];
extern const unsigned typeface_regular_size;
extern const unsigned char typeface_strong[];
extern const unsigned typeface_strong_size;

namespace {

Typeface loaded;

// The same characters as in web/build/parts, less the digits, which come from a second pass.
constexpr ImWchar all_but_digits[] = {
    0x20,   0x2F,   0x3A,   0x7E,   0xA0,   0x17F,  0x2C6,  0x2DC,  0x391,  0x3C9,  0x2010, 0x2026, 0x2030,
    0x2030, 0x2032, 0x2033, 0x2039, 0x203A, 0x20AC, 0x20AC, 0x2190, 0x2199, 0x2212, 0x2212, 0x221A, 0x221A,
    0x221E, 0x221E, 0x2248, 0x2248, 0x2260, 0x2260, 0x2264, 0x2265, 0x25A0, 0x25FF, 0x2713, 0x2713, 0};
constexpr ImWchar digits[] = {'0', '9', 0};
constexpr float width_of_0_regular = 0.516f;  // of a digit, in line heights; measured with hb-shape
constexpr float width_of_0_strong = 0.551f;

ImFont* add(const unsigned char* data, unsigned size, float pixels, float digit_width) {
  ImFontConfig config;
  config.FontDataOwnedByAtlas = false;
  config.OversampleH = 2;
  config.OversampleV = 1;
  config.PixelSnapH = true;
  config.GlyphRanges = all_but_digits;
  ImFontAtlas& atlas = *ImGui::GetIO().Fonts;
  void* bytes = const_cast<unsigned char*>(data);  // read only, but the interface of the atlas has no const
  atlas.AddFontFromMemoryTTF(bytes, static_cast<int>(size), pixels, &config);
  config.MergeMode = true;
  config.GlyphRanges = digits;
  config.GlyphMinAdvanceX = config.GlyphMaxAdvanceX = std::round(pixels * digit_width);
  return atlas.AddFontFromMemoryTTF(bytes, static_cast<int>(size), pixels, &config);
}

}  // namespace

void load_typeface(float ratio, float scale) {
  ratio = std::clamp(ratio, 0.5f, 4.0f);
  scale = std::clamp(scale, 0.5f, 2.0f);
  ImGuiIO& io = ImGui::GetIO();
  io.Fonts->Clear();
  const auto regular = [&](float size) {
    return add(typeface_regular, typeface_regular_size, std::round(size * scale * ratio), width_of_0_regular);
  };
  const auto strong = [&](float size) {
    return add(typeface_strong, typeface_strong_size, std::round(size * scale * ratio), width_of_0_strong);
  };
  loaded.text = regular(18);
  loaded.small = regular(15);
  loaded.strong = strong(18);
  loaded.headline = strong(23);
  io.FontGlobalScale = 1 / ratio;
  io.Fonts->Build();
}

const Typeface& typeface() { return loaded; }

}  // namespace lw::page
