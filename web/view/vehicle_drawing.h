// The vehicle from above at one moment of the drive.
//
// Track width, wheel diameters, sensor places and spots are to scale. Chassis and tyre width are not in a
// scenario; they are drawn in proportion. Beside each wheel stands a gauge: the bar is the command, from the
// middle forward or back, full length = 100 %; the notch is the speed the wheel really has.
#pragma once

#include <imgui.h>

#include <span>

#include "engine/drive/trace.h"
#include "web/panel/theme.h"
#include "web/view/transform.h"

namespace lw::view {

/// `readings`: fraction of full scale, one a sensor; may be empty. `named` writes the readings by the spots.
void draw_vehicle(ImDrawList& draw, const View& view, const Scenario& scenario, const TraceRow& row,
                  std::span<const double> readings, const panel::Theme& theme, bool named);

/// How far the drawing reaches from the middle of the axle, mm.
double reach_of_vehicle(const Scenario& scenario);

}  // namespace lw::view
