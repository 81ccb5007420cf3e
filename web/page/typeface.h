// The typeface of the page: Inter, in two weights, rasterised for the screen's pixel ratio.
//
// Inter's digits have widths of their own; here every digit gets the width of "0", so that a number does not
// dance while it is dragged and columns of numbers align.
#pragma once

struct ImFont;

namespace lw::page {

// Sizes are line heights in CSS pixels, as Dear ImGui counts them; the em of Inter is 0.83 of that.
struct Typeface {
  ImFont* text = nullptr;      // 18 px (em 15), regular: everything by default
  ImFont* small = nullptr;     // 15 px (em 12.5), regular: axis labels, units
  ImFont* strong = nullptr;    // 18 px, semibold: section titles
  ImFont* headline = nullptr;  // 23 px (em 19), semibold: the one sentence that says how the drive went
};

/// Puts the typeface in the current Dear ImGui context, for `ratio` device pixels a CSS pixel (0.5 to 4).
/// Sizes are those above times `scale` (0.5 to 2) whatever the ratio. Call it between frames; fonts of an
/// earlier call are gone afterwards.
void load_typeface(float ratio, float scale = 1.0f);

/// The fonts of the last load_typeface(); null before the first.
const Typeface& typeface();

}  // namespace lw::page
