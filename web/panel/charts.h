// Strip charts on one time axis: error, the terms P, I and D, steer, both wheel commands, and by choice
// deviation and speed. One cursor goes through all strips; it is the time at which the vehicle stands on the
// floor.
//
// Press or drag: move the cursor. Wheel or pinch: zoom about the finger. Drag with the right or middle button
// or Shift, wheel sideways, two fingers: pan. Double click: the whole drive.
#pragma once

#include "web/page_app.h"
#include "web/panel/axis.h"
#include "web/panel/grips.h"

namespace lw::panel {

/// One strip: curves that share a vertical axis. `first` counts into curves().
struct Strip {
  const char* name;
  const char* unit;
  int first, count;
};
std::span<const Strip> strips();

/// Every curve, in the order of the strips. The error's unit depends on the sensors: % of full scale, or mm
/// for a bar.
std::span<const Curve> curves(Scheme scheme);

void draw_charts(Ui& ui, const Box& box);
void pinch_charts(Ui& ui, const Box& box, const app::Pinch& pinch);

/// The time shown, s: the whole drive unless zoomed.
Span time_shown(const Desk& desk, const ChartState& charts);

/// Zooms by `factor` (> 1 is nearer) about time `about`, and pans by `shift` (s); kept within the drive.
void zoom_time(const Desk& desk, ChartState& charts, double about, double factor, double shift);

}  // namespace lw::panel
