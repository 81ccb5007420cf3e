#include "web/view/transform.h"

#include <algorithm>

namespace lw::view {

void Box::add(double x, double y) {
  low_x = std::min(low_x, x), high_x = std::max(high_x, x);
  low_y = std::min(low_y, y), high_y = std::max(high_y, y);
}

Pixel to_screen(const View& view, double x_mm, double y_mm) {
  const double middle_x = view.frame.x + 0.5 * view.frame.width;
  const double middle_y = view.frame.y + 0.5 * view.frame.height;
  return {static_cast<float>(middle_x + view.scale * (x_mm - view.centre_x)),
          static_cast<float>(middle_y - view.scale * (y_mm - view.centre_y))};
}

Point to_floor(const View& view, Pixel p) {
  const double middle_x = view.frame.x + 0.5 * view.frame.width;
  const double middle_y = view.frame.y + 0.5 * view.frame.height;
  return {view.centre_x + (p.x - middle_x) / view.scale, view.centre_y - (p.y - middle_y) / view.scale};
}

View panned(View view, float dx, float dy) {
  view.centre_x -= dx / view.scale;
  view.centre_y += dy / view.scale;
  return view;
}

View zoomed(View view, Pixel about, double factor) {
  const Point held = to_floor(view, about);
  view.scale = std::clamp(view.scale * factor, scale_least, scale_most);
  const Point now = to_floor(view, about);
  view.centre_x += held.x_mm - now.x_mm;
  view.centre_y += held.y_mm - now.y_mm;
  return view;
}

View fitted(Frame frame, const Box& box, float margin) {
  View view;
  view.frame = frame;
  Box all = box;
  if (all.empty()) all.add(-500, -500), all.add(500, 500);
  const float room = 0.25f * std::min(frame.width, frame.height);
  const double free = 2.0 * std::min(margin, room);
  const double across = std::max(all.high_x - all.low_x, 1.0), up = std::max(all.high_y - all.low_y, 1.0);
  const double scale = std::min((frame.width - free) / across, (frame.height - free) / up);
  view.scale = std::clamp(scale, scale_least, scale_most);
  view.centre_x = 0.5 * (all.low_x + all.high_x);
  view.centre_y = 0.5 * (all.low_y + all.high_y);
  return view;
}

View in_frame(View view, Frame frame) {
  view.frame = frame;
  return view;
}

}  // namespace lw::view
