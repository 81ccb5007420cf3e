// The page worked by hand, without a window: every step, every field, undo, refusals, files, links, storage.
// What is expected follows from design section 8 and web/panel; no outside source.
#include <set>

#include "engine/scenario/fields.h"
#include "engine/scenario/link.h"
#include "engine/scenario/same.h"
#include "engine/scenario/text.h"
#include "tests/catch.h"
#include "tests/web/hand.h"
#include "web/page/host_null.h"
#include "web/page_app.h"

#include <imgui.h>

using namespace lw;

namespace {

/// A browser without memory, so that each test starts at the first visit.
struct Fresh {
  Fresh() { host::asked() = {}; }
};

/// What is on screen, by way of what the page kept.
Scenario on_screen() {
  const auto scenario = read(host::asked().kept["linewright.scenario"], "kept");
  REQUIRE(scenario.ok());
  return *scenario;
}

constexpr const char* steps[] = {"Vehicle", "Sensors", "Course", "Controller", "Stress", "Hand over"};

/// Everything that a step shows, from top to bottom of its scroll.
std::set<std::string> labels_of_step(Hand& hand, const char* step) {
  std::set<std::string> labels;
  hand.click(step);
  for (int page = 0; page < 12; ++page) {
    for (const page::Item& item : page::items()) labels.insert(item.label);
    hand.move(1100, 600);
    hand.wheel(-3);
  }
  return labels;
}

}  // namespace

TEST_CASE("every field of a scenario has its control somewhere on the panel") {
  Fresh fresh;
  Hand hand(1280, 1000);
  std::set<std::string> labels;
  for (const char* step : steps) labels.merge(labels_of_step(hand, step));
  const auto shown = [&](const std::string& path) {
    for (const std::string& label : labels) {
      if (label.find(path) != std::string::npos) return true;
    }
    return false;
  };
  const std::set<std::string> by_list{"course.pieces", "course.points_mm", "course.corners", "course.gaps_mm",
                                      "stress.spread"};
  each_field(static_cast<const Scenario&>(Scenario{}), [&](const FieldInfo& info, const auto&) {
    const std::string path = path_of(info);
    if (by_list.count(path)) return;
    if (path == "sensors.gain" || path == "sensors.offset_pct" || path == "sensors.lateral_mm") {
      CHECK(shown(path + "[0]"));
      return;
    }
    INFO(path);
    CHECK(shown(path));
  });
  CHECK((labels.count("+ Straight") == 1 || labels.count("Build it from exact pieces instead") == 1));
  CHECK(shown("Gap"));
  CHECK(shown("tolerance"));
}

TEST_CASE("typed gains are taken, driven at once and undone as one step") {
  Fresh fresh;
  Hand hand;
  const Scenario before = on_screen();
  hand.type("##controller.kp", "0.41");
  hand.key(ImGuiKey_Enter);
  CHECK(on_screen().controller.kp == 0.41);
  hand.click("Undo");
  CHECK(same(on_screen(), before));
  hand.key(ImGuiKey_Y, true);
  CHECK(on_screen().controller.kp == 0.41);
  hand.key(ImGuiKey_Z, true);
  CHECK(same(on_screen(), before));
}

TEST_CASE("a dragged spot is one step of undo however often it moves") {
  Fresh fresh;
  Hand hand;
  const Scenario before = on_screen();
  hand.drag("controller.base_pct line", 30, 0);
  CHECK(on_screen().controller.base_pct > before.controller.base_pct);
  hand.click("Undo");
  CHECK(same(on_screen(), before));
}

TEST_CASE("a value out of range is refused, and what was there stays") {
  Fresh fresh;
  Hand hand;
  const Scenario before = on_screen();
  for (const char* wild : {"300", "-1", "1e999", "nonsense"}) {
    hand.type("##sensors.noise_pct", wild);
    hand.key(ImGuiKey_Enter);
    INFO(wild);
    CHECK(same(on_screen(), before));
  }
}

TEST_CASE("gains per second are stored in the scenario's own unit") {
  Fresh fresh;
  Hand hand;
  const double period = on_screen().loop.period_ms / 1000.0;
  const bool per_loop = on_screen().controller.gains == GainUnit::per_loop;
  hand.type("##controller.ki per second", "0.5");
  hand.key(ImGuiKey_Enter);
  CHECK(on_screen().controller.ki == Approx(per_loop ? 0.5 * period : 0.5));
}

TEST_CASE("wheel mismatch changes both wheels about their mean") {
  Fresh fresh;
  Hand hand;
  const Vehicle before = on_screen().vehicle;
  hand.type("##wheel mismatch", "4");
  hand.key(ImGuiKey_Enter);
  const Vehicle after = on_screen().vehicle;
  CHECK(after.wheel_left_mm + after.wheel_right_mm == Approx(before.wheel_left_mm + before.wheel_right_mm));
  CHECK(after.wheel_right_mm / after.wheel_left_mm == Approx(1.02 / 0.98).epsilon(1e-5));
}

TEST_CASE("a bad file or link says why, and what was on screen stays") {
  Fresh fresh;
  Hand hand;
  const Scenario before = on_screen();
  app::file_opened("aisle.toml", "format = \"linewright 1\"\n[vehicle]\nwheels = 3\n");
  hand.frame(2);
  CHECK(hand.has("Close message"));
  CHECK(same(on_screen(), before));
  hand.click("Close message");
  CHECK_FALSE(hand.has("Close message"));
  app::fragment_changed("lw1.!!!");
  hand.frame(2);
  CHECK(hand.has("Close message"));
  CHECK(same(on_screen(), before));
  app::file_opened("open.toml", "format = \"linewright 1\"\n[course]\npieces = [{ straight_mm = 300.0 }]\n");
  hand.frame(2);
  CHECK(hand.has("Close message"));
  CHECK(same(on_screen(), before));
  app::text_pasted("a shopping list");
  hand.frame(2);
  CHECK(same(on_screen(), before));
}

TEST_CASE("a copied link opens as the same scenario, and opening is one step of undo") {
  Fresh fresh;
  Hand hand;
  hand.type("##controller.kp", "0.37");
  hand.key(ImGuiKey_Enter);
  const Scenario sent = on_screen();
  hand.click("Copy link");
  REQUIRE(host::asked().copied.size() == 1);
  const std::string link = host::asked().copied[0];
  CHECK(same(*decode_link(link), sent));
  hand.click("Undo");
  const Scenario other = on_screen();
  app::fragment_changed(link.substr(link.find('#') + 1));
  hand.frame(3);
  CHECK(same(on_screen(), sent));
  hand.click("Undo");
  CHECK(same(on_screen(), other));
}

TEST_CASE("what is on screen survives closing the page, and a fragment in the address wins over it") {
  Fresh fresh;
  Scenario left;
  {
    Hand hand;
    hand.type("##sensors.noise_pct", "1.5");
    hand.key(ImGuiKey_Enter);
    left = on_screen();
  }
  {
    Hand hand;
    CHECK(same(on_screen(), left));
    CHECK(same(*decode_link(host::asked().fragment), left));
  }
  Scenario sent = left;
  sent.sensors.noise_pct = 0.25;
  Hand hand;
  app::fragment_changed(*encode_link(sent));
  hand.frame(2);
  CHECK(same(on_screen(), sent));
}

TEST_CASE("a browser that keeps nothing still drives") {
  Fresh fresh;
  host::asked().refuses_to_store = true;
  Hand hand;
  hand.type("##controller.kp", "0.5");
  hand.key(ImGuiKey_Enter);
  CHECK(decode_link(host::asked().fragment)->controller.kp == 0.5);
}

TEST_CASE("the collection puts a scenario on screen, and files are saved and asked for") {
  Fresh fresh;
  Hand hand;
  hand.click("Scenarios");
  hand.click("circle_left.toml");
  CHECK(on_screen().course.closed);
  hand.click("Scenarios");
  hand.click("Save as file");
  REQUIRE(host::asked().saved.size() == 1);
  CHECK(same(*read(host::asked().saved[0].bytes, "saved"), on_screen()));
  hand.click("Open a file");
  CHECK(host::asked().choices.size() == 1);
}

TEST_CASE("playback moves and stops, and a page at rest asks for no more frames") {
  Fresh fresh;
  Hand hand;
  CHECK_FALSE(hand.frame(3));
  hand.click("Play");
  CHECK(hand.frame(2));
  CHECK(hand.has("Pause"));
  hand.click("Pause");
  CHECK_FALSE(hand.frame(3));
}

TEST_CASE("nothing lies on anything else at the three sizes, and touch targets are tall enough") {
  Fresh fresh;
  const std::pair<float, float> sizes[] = {{1280.f, 800.f}, {1920.f, 1080.f}, {820.f, 1180.f}};
  for (const auto& size : sizes) {
    Hand hand(size.first, size.second);
    const bool tablet = size.first < size.second;
    for (const char* step : steps) {
      hand.click(step);
      const std::vector<page::Item> items = page::items();
      for (const char* name : {"Undo", "Scenarios", "Copy link", "Play"}) {
        const page::Item item = hand.find(name);
        INFO(name << " at " << size.first);
        CHECK(item.x >= 0);
        CHECK(item.x + item.width <= size.first);
        if (tablet) CHECK(item.height >= 40);
      }
      for (const page::Item& a : items) {
        for (const page::Item& b : items) {
          const bool lines = a.label.find(" line") != std::string::npos && b.label.substr(0, 2) == "##";
          if (!lines) continue;
          const bool apart = a.x + a.width <= b.x + 1 || b.x + b.width <= a.x + 1 ||
                             a.y + a.height <= b.y + 1 || b.y + b.height <= a.y + 1;
          INFO(a.label << " and " << b.label << " at " << size.first);
          CHECK(apart);
        }
      }
    }
  }
}
