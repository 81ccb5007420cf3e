// Curves as pixels: areas against closed forms, joins, ends, what lies over what; and that the page paints
// them anew only when they look different.
#include <imgui.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <random>

#include "tests/catch.h"
#include "tests/web/hand.h"
#include "web/page/host_null.h"
#include "web/page/picture.h"
#include "web/panel/strip_picture.h"

using namespace lw;
using namespace lw::panel;

namespace {

constexpr std::uint32_t white = 0xFFFFFFFF;

/// What falls or rises by `slope` a column from `from` on, as decimate() hands it out.
Decimated ramp(int columns, float from, float slope) {
  Decimated curve;
  for (int c = 0; c < columns; ++c) {
    const float begin = c > 0 ? curve.last.back() : from, end = begin + slope;
    curve.low.push_back(std::min(begin, end));
    curve.high.push_back(std::max(begin, end));
    curve.last.push_back(end);
  }
  return curve;
}

int alpha_at(const Pixels& pixels, int x, int y) {
  return static_cast<int>(pixels.colours[static_cast<std::size_t>(y * pixels.width + x)] >> 24);
}

/// Pixels' worth of ink in a column.
double ink(const Pixels& pixels, int column) {
  double sum = 0;
  for (int y = 0; y < pixels.height; ++y) sum += alpha_at(pixels, column, y);
  return sum / 255.0;
}

Pixels blank(int width, int height) {
  Pixels pixels;
  clear(pixels, width, height);
  return pixels;
}

/// Value 0 in the middle, a unit is a pixel, up.
StripPlace whole(const Pixels& pixels) {
  return {0, pixels.height, 0.5f * static_cast<float>(pixels.height), 1.0f};
}

}  // namespace

TEST_CASE("a straight curve of any slope covers as much of a column as a band of its thickness") {
  // A band of thickness w and slope s has the upright extent w sqrt(1 + s^2): plane geometry.
  for (const float slope : {0.0f, 0.3f, -0.7f, 1.0f, 2.5f, -6.0f, 14.0f}) {
    for (const float thick : {1.5f, 2.4f, 3.0f}) {
      Pixels pixels = blank(24, 600);
      draw_curve(pixels, whole(pixels), ramp(24, -12.0f * slope + 0.37f, slope), white, thick);
      const double expected = thick * std::sqrt(1.0 + slope * slope);
      INFO("slope " << slope << ", thick " << thick);
      for (int c = 4; c < 20; ++c) CHECK(ink(pixels, c) == Approx(expected).epsilon(0.01).margin(0.02));
    }
  }
}

TEST_CASE("a level curve covers first and last pixel by the share that lies in them") {
  Pixels pixels = blank(5, 20);
  // y = 10 - 0.4 = 9.6: the band reaches from 8.85 to 10.35.
  draw_curve(pixels, whole(pixels), ramp(5, 0.4f, 0.0f), white, 1.5f);
  CHECK(alpha_at(pixels, 2, 7) == 0);
  CHECK(alpha_at(pixels, 2, 8) == Approx(0.15 * 255).margin(1));
  CHECK(alpha_at(pixels, 2, 9) == 255);
  CHECK(alpha_at(pixels, 2, 10) == Approx(0.35 * 255).margin(1));
  CHECK(alpha_at(pixels, 2, 11) == 0);
}

TEST_CASE("a column in which the curve turns is filled from its lowest to its highest value") {
  Pixels pixels = blank(5, 40);
  Decimated curve = ramp(5, 0.0f, 0.0f);
  curve.low[2] = -10.0f, curve.high[2] = 8.0f;  // and back to 0
  draw_curve(pixels, whole(pixels), curve, white, 1.5f);
  for (int y = 12; y < 30; ++y) CHECK(alpha_at(pixels, 2, y) == 255);
  CHECK(alpha_at(pixels, 2, 11) == Approx(0.75 * 255).margin(1));
  CHECK(alpha_at(pixels, 2, 30) == Approx(0.75 * 255).margin(1));
  CHECK(alpha_at(pixels, 2, 10) == 0);
  CHECK(alpha_at(pixels, 2, 31) == 0);
  // Half of 1.5 px to either side of the column's middle: a quarter of each neighbour.
  CHECK(alpha_at(pixels, 1, 15) == Approx(0.25 * 255).margin(1));
  CHECK(alpha_at(pixels, 3, 25) == Approx(0.25 * 255).margin(1));
  CHECK(alpha_at(pixels, 0, 15) == 0);
}

TEST_CASE("a jump reaches no farther than half the thickness beyond its values") {
  Pixels pixels = blank(9, 100);
  Decimated curve = ramp(9, -20.0f, 0.0f);
  curve.high[4] = curve.last[4] = 20.0f;
  for (std::size_t c = 5; c < 9; ++c) curve.low[c] = curve.high[c] = curve.last[c] = 20.0f;
  draw_curve(pixels, whole(pixels), curve, white, 1.5f);
  int highest = 100, lowest = 0;
  for (int c = 0; c < 9; ++c) {
    for (int y = 0; y < 100; ++y) {
      if (alpha_at(pixels, c, y) == 0) continue;
      highest = std::min(highest, y), lowest = std::max(lowest, y);
    }
  }
  CHECK(highest == 29);  // 30 - 0.75
  CHECK(lowest == 70);
}

TEST_CASE("any curve hangs together from column to column") {
  for (unsigned seed = 1; seed <= 20; ++seed) {
    std::mt19937 random(seed);
    const auto draw = [&] { return static_cast<float>(random() % 4001) / 100.0f - 20.0f; };
    Decimated curve;
    float now = draw();
    for (int c = 0; c < 60; ++c) {
      const float next = random() % 3 ? draw() : now, turn = random() % 2 ? draw() : now;
      curve.low.push_back(std::min({now, next, turn}));
      curve.high.push_back(std::max({now, next, turn}));
      curve.last.push_back(now = next);
    }
    Pixels pixels = blank(60, 60);
    draw_curve(pixels, whole(pixels), curve, white, 1.5f);
    INFO("seed " << seed);
    for (int c = 0; c < 60; ++c) {
      int first = 60, end = 0, beside = 0;
      for (int y = 0; y < 60; ++y) {
        if (alpha_at(pixels, c, y) < 60) continue;
        first = std::min(first, y), end = y + 1;
        if (c > 0 && alpha_at(pixels, c - 1, y) >= 60) ++beside;
      }
      REQUIRE(end > first);
      bool broken = false;
      for (int y = first; y < end; ++y) broken = broken || alpha_at(pixels, c, y) < 60;
      CHECK_FALSE(broken);
      CHECK((c == 0 || beside > 0));
    }
  }
}

TEST_CASE("nothing is drawn outside the strip's rows, after the drive, or beyond the picture") {
  Pixels pixels = blank(20, 30);
  const StripPlace place{10, 20, 15.0f, 1.0f};
  Decimated curve = ramp(40, -60.0f, 9.0f);  // longer than the picture is wide
  for (std::size_t c = 12; c < 40; ++c)
    curve.low[c] = curve.high[c] = curve.last[c] = std::numeric_limits<float>::quiet_NaN();
  curve.high[3] = 1e30f, curve.low[4] = -1e30f;
  draw_curve(pixels, place, curve, white, 1.5f);
  double drawn = 0;
  for (int c = 0; c < 20; ++c) {
    for (int y = 0; y < 30; ++y) {
      const bool may = y >= 10 && y < 20 && c <= 12;  // the last stroke softens the column behind it
      if (!may) CHECK(alpha_at(pixels, c, y) == 0);
    }
    drawn += ink(pixels, c);
  }
  CHECK(drawn > 10);
  draw_curve(pixels, {5, 5, 0.0f, 1.0f}, curve, white, 1.5f);
  Pixels none;
  draw_curve(none, {0, 0, 0.0f, 1.0f}, curve, white, 1.5f);
}

TEST_CASE("where curves cross, the later one lies over the earlier one") {
  // Porter and Duff, "Compositing Digital Images" (1984), over: a = a1 + a2 (1 - a1), a c = a1 c1 + a2 (1 -
  // a1) c2.
  Pixels pixels = blank(3, 10);
  const StripPlace place{0, 10, 5.0f, 1.0f};
  const Decimated level = ramp(3, -0.5f, 0.0f);  // the middle of row 5, covered wholly
  draw_curve(pixels, place, level, IM_COL32(200, 0, 0, 128), 1.0f);
  CHECK(pixels.colours[5 * 3 + 1] == IM_COL32(200, 0, 0, 128));
  draw_curve(pixels, place, level, IM_COL32(0, 100, 0, 64), 1.0f);
  const double a1 = 64 / 255.0, a2 = 128 / 255.0, a = a1 + a2 * (1 - a1);
  const std::uint32_t mixed = pixels.colours[5 * 3 + 1];
  CHECK((mixed >> 24) == Approx(255 * a).margin(1.5));
  CHECK((mixed & 255u) == Approx(200 * a2 * (1 - a1) / a).margin(1.5));
  CHECK(((mixed >> 8) & 255u) == Approx(100 * a1 / a).margin(1.5));
  draw_curve(pixels, place, level, IM_COL32(1, 2, 3, 255), 1.0f);
  CHECK(pixels.colours[5 * 3 + 1] == IM_COL32(1, 2, 3, 255));
}

namespace {

/// The texture that the page draws besides the typeface; null while there is none.
ImTextureID picture_drawn(int& triangles) {
  ImTextureID found = nullptr;
  triangles = 0;
  const ImDrawData& data = *ImGui::GetDrawData();
  for (int i = 0; i < data.CmdListsCount; ++i) {
    for (const ImDrawCmd& command : data.CmdLists[i]->CmdBuffer) {
      triangles += static_cast<int>(command.ElemCount) / 3;
      if (command.TextureId != ImGui::GetIO().Fonts->TexID) found = command.TextureId;
    }
  }
  return found;
}

}  // namespace

TEST_CASE("the strips are one picture, another one only when the curves look different") {
  host::asked() = {};
  Hand hand;
  int triangles = 0;
  const ImTextureID first = picture_drawn(triangles);
  REQUIRE(first != nullptr);
  CHECK(triangles < 15000);
  const auto changes = [&](auto&& act) {
    const ImTextureID before = picture_drawn(triangles);
    act();
    return picture_drawn(triangles) != before;
  };
  CHECK_FALSE(changes([&] { hand.frame(5); }));
  CHECK_FALSE(changes([&] { hand.move(500, 650); }));
  CHECK_FALSE(changes([&] { hand.press(), hand.release(); }));  // the cursor alone
  CHECK(changes([&] { hand.click("Steer strip"); }));
  CHECK(changes([&] { hand.move(500, 650), hand.wheel(1); }));
  hand.click("Keep to compare");
  CHECK(changes([&] { hand.click("Hide kept"); }));
  CHECK(changes([&] { hand.click("controller.kp line"); }));
}
