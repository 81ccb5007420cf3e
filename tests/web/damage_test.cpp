// What counts as changed on screen, from one frame's triangles to the next's.
#include "web/page/damage.h"

#include "tests/catch.h"

using namespace lw::page;

namespace {

struct Context {
  ImGuiContext* context = ImGui::CreateContext();
  Context() { ImGui::SetCurrentContext(context); }
  ~Context() { ImGui::DestroyContext(context); }
  Context(const Context&) = delete;
  Context& operator=(const Context&) = delete;
};

/// A screen of 640 x 320 pixels, drawn by hand.
struct Screen {
  Context context;
  ImDrawList list{ImGui::GetDrawListSharedData()};
  ImDrawData data;
  Damage damage;

  template <class Draw>
  std::vector<PixelBox> frame(Draw draw, ImVec2 size = {640, 320}, float scale = 1) {
    list._ResetForNewFrame();
    list.PushTextureID(nullptr);
    list.PushClipRect({0, 0}, size);
    draw(list);
    data.Clear();
    data.DisplaySize = size;
    data.FramebufferScale = {scale, scale};
    data.AddDrawList(&list);
    return damage.take(data);
  }
};

void floor_and(ImDrawList& list, float x, ImU32 colour = IM_COL32_WHITE) {
  list.AddRectFilled({0, 0}, {640, 320}, IM_COL32(20, 20, 20, 255));
  list.AddRectFilled({x, 70}, {x + 10, 80}, colour);
}

}  // namespace

TEST_CASE("the first frame is drawn whole, the same frame again not at all") {
  Screen screen;
  const auto draw = [](ImDrawList& list) { floor_and(list, 70); };
  const std::vector<PixelBox> first = screen.frame(draw);
  REQUIRE(first.size() == 1);
  CHECK(first[0].left == 0);
  CHECK(first[0].top == 0);
  CHECK(first[0].right == 640);
  CHECK(first[0].bottom == 320);
  CHECK(screen.frame(draw).empty());
  screen.damage.forget();
  CHECK(screen.frame(draw).size() == 1);
}

TEST_CASE("what moves is drawn anew where it was and where it is") {
  Screen screen;
  screen.frame([](ImDrawList& list) { floor_and(list, 70); });
  const std::vector<PixelBox> boxes = screen.frame([](ImDrawList& list) { floor_and(list, 400); });
  REQUIRE(boxes.size() == 2);
  CHECK(boxes[0].left == 64);
  CHECK(boxes[0].right == 128);
  CHECK(boxes[1].left == 384);
  CHECK(boxes[1].right == 448);
  for (const PixelBox& box : boxes) {
    CHECK(box.top == 64);
    CHECK(box.bottom == 128);
  }
}

TEST_CASE("a change of colour, texture, clip or order is a change") {
  Screen screen;
  const auto changes = [&](auto draw) { return !screen.frame(draw).empty(); };
  const auto plain = [](ImDrawList& list) { floor_and(list, 70); };
  screen.frame(plain);
  CHECK(changes([](ImDrawList& list) { floor_and(list, 70, IM_COL32(255, 0, 0, 255)); }));
  screen.frame(plain);
  CHECK(changes([](ImDrawList& list) {
    list.PushTextureID(reinterpret_cast<ImTextureID>(7));
    floor_and(list, 70);
    list.PopTextureID();
  }));
  screen.frame(plain);
  CHECK(changes([](ImDrawList& list) {
    list.PushClipRect({0, 0}, {75, 320});
    floor_and(list, 70);
    list.PopClipRect();
  }));
  screen.frame(plain);
  CHECK(changes([](ImDrawList& list) {
    list.AddRectFilled({70, 70}, {80, 80}, IM_COL32_WHITE);
    list.AddRectFilled({0, 0}, {640, 320}, IM_COL32(20, 20, 20, 255));
  }));
}

TEST_CASE("what is clipped away does not count") {
  Screen screen;
  const auto hidden = [](float x) {
    return [x](ImDrawList& list) {
      list.AddRectFilled({0, 0}, {640, 320}, IM_COL32(20, 20, 20, 255));
      list.PushClipRect({0, 0}, {50, 50});
      list.AddRectFilled({x, 100}, {x + 10, 110}, IM_COL32_WHITE);
      list.PopClipRect();
    };
  };
  screen.frame(hidden(100));
  CHECK(screen.frame(hidden(300)).empty());
}

TEST_CASE("another size or ratio is drawn whole, and edge tiles end at the screen") {
  Screen screen;
  const auto draw = [](ImDrawList& list) { floor_and(list, 70); };
  screen.frame(draw);
  const std::vector<PixelBox> larger = screen.frame(draw, {700, 330});
  REQUIRE(larger.size() == 1);
  CHECK(larger[0].right == 700);
  CHECK(larger[0].bottom == 330);
  const std::vector<PixelBox> finer = screen.frame(draw, {700, 330}, 2);
  REQUIRE(finer.size() == 1);
  CHECK(finer[0].right == 1400);
}
