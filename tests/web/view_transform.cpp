// The way from floor to screen and back.
#include "tests/catch.h"
#include "web/view/transform.h"

using namespace lw;
using namespace lw::view;

TEST_CASE("a view puts its centre in the middle of the frame, y up") {
  View view;
  view.frame = {100, 50, 800, 600};
  view.centre_x = 1000, view.centre_y = 2000, view.scale = 0.5;
  const Pixel middle = to_screen(view, 1000, 2000);
  CHECK(middle.x == 500.0f);
  CHECK(middle.y == 350.0f);
  const Pixel right_and_up = to_screen(view, 1100, 2040);
  CHECK(right_and_up.x == 550.0f);
  CHECK(right_and_up.y == 330.0f);
  const Point back = to_floor(view, right_and_up);
  CHECK(back.x_mm == Approx(1100));
  CHECK(back.y_mm == Approx(2040));
}

TEST_CASE("panning moves the floor with the hand") {
  View view;
  view.frame = {0, 0, 640, 480};
  view.scale = 0.3;
  const Point grabbed = to_floor(view, {200, 100});
  const Pixel now = to_screen(panned(view, 30, -12), grabbed.x_mm, grabbed.y_mm);
  CHECK(now.x == Approx(230));
  CHECK(now.y == Approx(88));
}

TEST_CASE("zooming keeps the floor under the pointer and stays within its range") {
  View view;
  view.frame = {10, 20, 1280, 800};
  view.centre_x = -300, view.scale = 0.4;
  const Pixel pointer{900, 130};
  const Point under = to_floor(view, pointer);
  for (const double factor : {1.25, 0.5, 1e-9, 1e12}) {
    view = zoomed(view, pointer, factor);
    const Pixel now = to_screen(view, under.x_mm, under.y_mm);
    CHECK(now.x == Approx(pointer.x).margin(0.01));
    CHECK(now.y == Approx(pointer.y).margin(0.01));
  }
  CHECK(view.scale == scale_most);
  CHECK(zoomed(view, pointer, 1e-12).scale == scale_least);
}

TEST_CASE("fitting shows the whole box with a margin, and something sensible for nothing") {
  Box box;
  box.add(-1000, 0), box.add(3000, 1000);
  const Frame frame{0, 0, 1000, 800};
  const View view = fitted(frame, box, 50);
  const Pixel low = to_screen(view, -1000, 0), high = to_screen(view, 3000, 1000);
  CHECK(low.x == Approx(50));
  CHECK(high.x == Approx(950));
  CHECK(low.y < 750);
  CHECK(high.y > 50);
  const View nothing = fitted(frame, {}, 50);
  CHECK(nothing.scale == Approx(0.7));
  Box dot;
  dot.add(5, 5);
  CHECK(fitted(frame, dot, 50).scale == scale_most);
}
