#include "web/panel/layout.h"

#include <algorithm>
#include <cmath>

namespace lw::panel {
namespace {

// What is left of the charts when they are folded: the names of the strips.
float folded(const Layout& layout, float scale) { return std::round((layout.touch ? 40.0f : 24.0f) * scale); }

Layout landscape(Layout layout, float width, float height, float scale, bool charts_open) {
  const float panel = std::round(std::clamp(width * 0.295f, 360.0f * scale, 420.0f * scale));
  const float left = width - panel;
  const float top = std::round(88.0f * scale), play = std::round((layout.touch ? 56.0f : 44.0f) * scale);
  const float open = std::clamp(height * 0.29f, 180.0f * scale, 420.0f * scale);
  const float charts = charts_open ? std::round(open) : folded(layout, scale);
  layout.top = {0, 0, left, top};
  layout.floor = {0, top, left, std::max(0.0f, height - top - play - charts)};
  layout.play = {0, height - play - charts, left, play};
  layout.charts = {0, height - charts, left, charts};
  layout.panel = {left, 0, panel, height};
  return layout;
}

Layout portrait(Layout layout, float width, float height, float scale, bool charts_open) {
  const float top = std::round(92.0f * scale), play = std::round(56.0f * scale);
  const float open = std::clamp(height * 0.15f, 120.0f * scale, 260.0f * scale);
  const float charts = charts_open ? std::round(open) : folded(layout, scale);
  // Folded charts leave their room to the panel, which has the least here.
  const float panel = std::round(height * 0.36f + (charts_open ? 0.0f : open - charts));
  const float floor = std::max(0.0f, height - top - play - charts - panel);
  layout.top = {0, 0, width, top};
  layout.floor = {0, top, width, floor};
  layout.play = {0, top + floor, width, play};
  layout.charts = {0, top + floor + play, width, charts};
  layout.panel = {0, height - panel, width, panel};
  return layout;
}

}  // namespace

float largest_scale(float width, float height) {
  const float across = height > width ? width / 800.0f : width / 1060.0f;
  return std::clamp(std::min(across, height / 660.0f), least_scale, most_scale);
}

Layout arrange(float width, float height, float scale, bool touch, bool charts_open) {
  Layout layout;
  layout.upright = height > width;
  layout.touch = touch || layout.upright;
  return layout.upright ? portrait(layout, width, height, scale, charts_open)
                        : landscape(layout, width, height, scale, charts_open);
}

}  // namespace lw::panel
