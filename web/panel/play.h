// The bar under the floor: play, step a loop, how fast, where in time, and the choice to compare with.
#pragma once

#include "web/panel/grips.h"

namespace lw::panel {

void draw_play(Ui& ui, const Box& box);

/// The cursor goes by whole loop periods: +1 to the next row of the trace, -1 to the one before.
void step_loops(Desk& desk, int loops);

/// Plays from the cursor, from the start when it stands at the end; or stops.
void toggle_play(Desk& desk);

}  // namespace lw::panel
