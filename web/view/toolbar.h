// The tools of the floor: a strip of them down its left edge, and along its upper edge what the chosen one
// offers.
#pragma once

#include <string_view>

#include "web/view/bench.h"

namespace lw::view {

float strip_width(const Bench& bench);

/// The strip; `box` is the whole floor with the strip in it.
void show_strip(Bench& bench, const panel::Box& box);

/// What can be set for the chosen tool. Returns the lower edge, px.
float show_options(Bench& bench);

/// What a drag does with the chosen tool.
std::string_view hint_of(const Bench& bench);

}  // namespace lw::view
