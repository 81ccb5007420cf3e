// Between the floor and the screen: a window of the floor, seen from straight above.
//
// Floor: millimetres, x right, y up. Screen: CSS pixels, x right, y down, from the canvas's corner. A view is
// the point of the floor in the middle of the frame and one scale for both directions, so
//   x_px = middle_x_px + scale (x_mm - centre_x_mm),  y_px = middle_y_px - scale (y_mm - centre_y_mm).
#pragma once

#include "engine/scenario/scenario.h"

namespace lw::view {

/// A place on the screen, CSS pixels.
struct Pixel {
  float x = 0, y = 0;
};

/// The part of the screen that shows the floor, CSS pixels.
struct Frame {
  float x = 0, y = 0, width = 1, height = 1;
  bool holds(Pixel p) const { return p.x >= x && p.x < x + width && p.y >= y && p.y < y + height; }
};

/// A rectangle of the floor, mm; empty until something is put in.
struct Box {
  double low_x = 1e300, low_y = 1e300, high_x = -1e300, high_y = -1e300;
  bool empty() const { return high_x < low_x; }
  void add(double x, double y);
};

inline constexpr double scale_least = 1e-4;  // px per mm: 10 m a pixel
inline constexpr double scale_most = 50.0;   // px per mm: a 20 mm line as wide as a screen

struct View {
  Frame frame;
  double centre_x = 0, centre_y = 0;  // mm
  double scale = 1;                   // px per mm
};

Pixel to_screen(const View& view, double x_mm, double y_mm);
Point to_floor(const View& view, Pixel p);

/// The floor moved with the hand by (dx, dy) pixels.
View panned(View view, float dx, float dy);

/// Nearer by `factor` (> 1), the floor under `about` staying where it is; the scale is held to its range.
View zoomed(View view, Pixel about, double factor);

/// The whole box in the frame with `margin` pixels kept free on every side (less where the frame is small).
/// An empty box gives a metre around the origin.
View fitted(Frame frame, const Box& box, float margin);

/// The same middle and scale in another frame, as when the window is resized.
View in_frame(View view, Frame frame);

}  // namespace lw::view
