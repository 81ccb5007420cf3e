// `linewright describe` and `linewright link`.
#include <cmath>

#include "engine/scenario/fields.h"
#include "tests/catch.h"
#include "tests/outside/python.h"
#include "tests/shell/calls.h"

using namespace lw::test;

TEST_CASE("a description for people is a scenario that drives the same", "[shell]") {
  const Ran described = linewright("describe " + scenario("long_mixed"));
  REQUIRE(described.code == 0);
  CHECK(json_from("drive --json -", described.out)["trace_hash"] ==
        json_from("drive --json " + scenario("long_mixed"))["trace_hash"]);
}

TEST_CASE("a description tells every key and the gains in both units", "[shell]") {
  const Json json = json_from("describe --json " + scenario("long_mixed"));
  CHECK(keys_of(json) == "scenario gains derived");
  CHECK(keys_of(json["scenario"]) ==
        "title note vehicle loop sensors controller course floor drive stress expect");
  const lw::Scenario defaults;
  std::size_t keys = 0;
  lw::each_field(defaults, [&](const lw::FieldInfo& info, const auto&) {
    const Json& section =
        info.section.empty() ? json["scenario"] : json["scenario"][std::string(info.section)];
    CHECK(section.contains(std::string(info.key)));
    ++keys;
  });
  CHECK(keys > 60);
  // Gains per second of 0.45, 0.08 and 0.03 at a period of 8 ms, by hand.
  const Json &loop = json["gains"]["per_loop"], &second = json["gains"]["per_second"];
  CHECK(loop["kp"].get<double>() == Approx(0.45));
  CHECK(loop["ki"].get<double>() == Approx(0.00064));
  CHECK(loop["kd"].get<double>() == Approx(3.75));
  CHECK(second["ki"].get<double>() == Approx(0.08));
  CHECK(second["kd"].get<double>() == Approx(0.03));
}

TEST_CASE("text and JSON of a description say the same to another program", "[shell]") {
  const std::string python = python_with("tomllib", "the description");
  if (python.empty()) return;
  for (const std::string name : {"long_mixed", "slalom", "gaps", "square_corners", "too_fast"}) {
    INFO(name);
    const std::string text = scratch("described.toml"), json = scratch("described.json");
    save(text, linewright("describe " + scenario(name)).out);
    save(json, linewright("describe --json " + scenario(name)).out);
    CHECK(passes(python, "shell_check.py", "toml '" + text + "' '" + json + "'"));
  }
}

TEST_CASE("derived figures are those worked out by hand", "[shell]") {
  // Wheels of 60 mm at 220 rpm: pi 60 220 / 60 = 691.150 mm/s; at 40 %, 276.460 mm/s.
  const std::string course =
      "format = \"linewright 1\"\n[course]\n"
      "pieces = [{ straight_mm = 800.0 }, { radius_mm = 350.0, turn_deg = 180.0 },\n"
      "          { straight_mm = 800.0 }, { radius_mm = 350.0, turn_deg = 180.0 }]\n"
      "[vehicle]\ncommand_delay_ms = 11.0\ngrip = 0.5\n";
  const Json derived = json_from("describe --json -", course)["derived"];
  const auto figure = [&](const char* key) { return derived[key].get<double>(); };
  CHECK(figure("top_speed_mm_s") == Approx(691.1504));
  CHECK(figure("base_speed_mm_s") == Approx(276.4602));
  CHECK(figure("loops_per_s") == Approx(1000.0 / 5.5));
  CHECK(figure("travel_per_loop_mm") == Approx(276.4602 * 0.0055));
  CHECK(figure("forward_time_ms") == Approx(1000.0 * 70.0 / 276.4602));
  CHECK(figure("delay_loops") == Approx(2.0));
  // Steer at most 100 %: wheels at 40 - 100 = -60 % and 100 %, so v = 20 %, and R = b/2 (100 - 60)/(100 +
  // 60).
  CHECK(figure("turn_radius_at_limit_mm") == Approx(70.0 * 40.0 / 160.0));
  // Steer 60 %: wheels at -20 % and 100 %, R = b/2 80/120.
  CHECK(figure("turn_radius_unsaturated_mm") == Approx(70.0 * 80.0 / 120.0));
  CHECK(figure("course_length_mm") == Approx(1600.0 + 2.0 * 3.14159265 * 350.0));
  CHECK(figure("course_time_s") == Approx((1600.0 + 2.0 * 3.14159265 * 350.0) / 276.4602));
  CHECK(figure("tightest_bend_mm") == Approx(350.0));
  CHECK(figure("tightest_bend_grip") == Approx(0.2764602 * 0.2764602 / 0.35 / 9.80665));
  CHECK(figure("tightest_bend_speed_mm_s") == Approx(1000.0 * std::sqrt(0.5 * 9.80665 * 0.35)));
  REQUIRE(derived["bends"].size() == 2);
  CHECK(derived["bends"][1]["radius_mm"].get<double>() == Approx(350.0));
  CHECK(derived["bends"][1]["turn_deg"].get<double>() == Approx(180.0));
}

TEST_CASE("what has no value is null", "[shell]") {
  const Json json = json_from("describe --json -", straight_text("[controller]\nbase_pct = 0.0\n"));
  CHECK(json["derived"]["tightest_bend_mm"].is_null());
  CHECK(json["derived"]["forward_time_ms"].is_null());
  CHECK(json["scenario"]["expect"]["outcome"].is_null());
}

TEST_CASE("without a scenario every key is told with default, range and meaning", "[shell]") {
  const Json json = json_from("describe --json");
  const lw::Scenario defaults;
  std::size_t keys = 0;
  lw::each_field(defaults, [&](const lw::FieldInfo& info, const auto&) {
    const Json& key = json["keys"][keys++];
    CHECK(key["key"] == lw::path_of(info));
    CHECK(key["meaning"] == std::string(info.meaning));
  });
  CHECK(json["keys"].size() == keys);
  const Ran ran = linewright("describe");
  CHECK(ran.code == 0);
  CHECK(ran.out.find("  period_ms                 5.5           between 0.1 and 1000 ms") !=
        std::string::npos);
  CHECK(ran.out.find("edge | pair | bar") != std::string::npos);
}

TEST_CASE("a scenario goes into a link and out of it again, bit for bit", "[shell]") {
  for (const std::string name : {"long_mixed", "slalom", "gaps", "square_corners"}) {
    INFO(name);
    const Ran link = linewright("link " + scenario(name));
    REQUIRE(link.code == 0);
    CHECK(link.out.find("linewright.html#lw1.") == 0);
    const Ran text = linewright("link -", link.out);
    REQUIRE(text.code == 0);
    CHECK(text.out.find("format = \"linewright 1\"\n") == 0);
    CHECK(linewright("link -", text.out).out == link.out);
    CHECK(json_from("drive --json -", text.out)["trace_hash"] ==
          json_from("drive --json " + scenario(name))["trace_hash"]);
  }
}

TEST_CASE("a link opens the page it is told to, with or without its #", "[shell]") {
  const std::string here = "link " + scenario("straight") + " --page https://carts.example/lw/";
  CHECK(linewright(here).out.find("https://carts.example/lw/#lw1.") == 0);
  CHECK(linewright(here + "#").out.find("https://carts.example/lw/#lw1.") == 0);
  const Json json = json_from("link --json " + scenario("straight") + " --set controller.kp=0.125");
  CHECK(keys_of(json) == "link text");
  CHECK(json["text"].get<std::string>().find("kp = 0.125\n") != std::string::npos);
  CHECK(json_from("describe --json '" + json["link"].get<std::string>() +
                  "'")["scenario"]["controller"]["kp"] == 0.125);
}
