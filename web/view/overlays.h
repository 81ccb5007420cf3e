// What hovers over the floor: scale, legend, words by the pointer, the close-up of the vehicle.
#pragma once

#include <string_view>

#include "web/view/bench.h"

namespace lw::view {

/// A few words beside a place, kept inside the frame.
void draw_bubble(const Bench& bench, Pixel at, std::string_view text, ImU32 colour);

/// Lower edge of the floor: what a drag does, one grid square's length, and what the colours mean.
void draw_footer(const Bench& bench, double grid_mm, std::string_view hint);
inline constexpr float footer_height = 30;  // CSS pixels at least

/// The vehicle with the floor around it, large, in the upper right corner of the frame, below `top`.
void draw_close_up(const Bench& bench, float top);
/// The length of its sides, px; 0 where the frame is too small for one.
float close_up_side(const Frame& frame, float unit);

}  // namespace lw::view
