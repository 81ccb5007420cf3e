// The panel: actions, what is turned most often, and the steps of the work, each with its fields.
#pragma once

#include <vector>

#include "web/panel/files.h"
#include "web/panel/grips.h"

namespace lw::panel {

void draw_panel(Ui& ui, const Box& box, const std::vector<LibraryEntry>& library);

/// The line at the foot of the floor that says what just happened, or what was refused.
void draw_notice(Ui& ui, const Box& floor);

/// Undo, redo, play, steps of a loop, save, by key; nothing while a text is being typed.
void take_keys(Ui& ui);

}  // namespace lw::panel
