// `linewright check`: exit codes, what holds and what does not, and the report for build servers.
#include "shell/expectations.h"
#include "shell/junit.h"
#include "tests/catch.h"
#include "tests/outside/python.h"
#include "tests/shell/calls.h"

using namespace lw::test;

namespace {

std::string expecting(const std::string& expectations) { return straight_text("[expect]\n" + expectations); }

Json checked(const std::string& text, int code) {
  const Ran ran = linewright("check --json -", text);
  INFO(ran.err);
  REQUIRE(ran.code == code);
  const Json json = Json::parse(ran.out, nullptr, false);
  REQUIRE(json.is_object());
  return json;
}

}  // namespace

TEST_CASE("every scenario of the project holds what it expects", "[shell]") {
  const Json json = json_from("check --json " LINEWRIGHT_SOURCE_DIR "/scenarios/*.toml");
  CHECK(keys_of(json) == "files passed failed");
  CHECK(json["files"].size() >= 14);
  CHECK(json["failed"] == 0);
  std::size_t asserted = 0;
  for (const Json& file : json["files"]) {
    CHECK(keys_of(file) == "file title outcome trace_hash reason passed expectations");
    CHECK(file["passed"] == true);
    CHECK(file["expectations"].size() >= 2);
    asserted += file["expectations"].size();
  }
  CHECK(json["passed"] == asserted);
}

TEST_CASE("the expectations of a scenario are near its figures", "[shell]") {
  // Hardly any steer, a slower drive, or a body that turns sluggishly has to trip something in most
  // scenarios, or the expectations are too wide to guard anything.
  const std::string all = LINEWRIGHT_SOURCE_DIR "/scenarios/*.toml";
  for (const char* change :
       {"controller.kp=0.01", "controller.base_pct=30", "vehicle.turn_time_constant_ms=400"}) {
    INFO(change);
    const Ran ran = linewright("check --json " + all + " --set " + change);
    REQUIRE(ran.code == 1);
    const Json json = Json::parse(ran.out, nullptr, false);
    std::size_t tripped = 0;
    for (const Json& file : json["files"]) tripped += file["passed"] == false ? 1 : 0;
    CHECK(4 * tripped >= 3 * json["files"].size());
  }
}

TEST_CASE("an expectation that fails exits 1 and is told with both values", "[shell]") {
  const std::string text = expecting("outcome = \"line_lost\"\ntime_s_max = 1.0\ndeviation_mm_max = 5.0\n");
  const Json json = checked(text, 1);
  CHECK(json["passed"] == 1);
  CHECK(json["failed"] == 2);
  const Json& first = json["files"][0]["expectations"][0];
  CHECK(keys_of(first) == "key expected actual passed");
  CHECK(first ==
        Json::parse(R"({"key":"outcome","expected":"line_lost","actual":"finished","passed":false})"));
  const Ran ran = linewright("check -", text);
  CHECK(ran.code == 1);
  CHECK(ran.out.find("outcome: finished, expected line_lost\n") != std::string::npos);
  CHECK(ran.out.find("; the drive ended as finished\n") != std::string::npos);
  CHECK(ran.out.find("1 scenario: 1 expectation held, 2 failed\n") != std::string::npos);
}

TEST_CASE("each limit holds at its figure and fails just below", "[shell]") {
  const Json drive = json_from("drive --json " + scenario("heavy_cart"));
  const struct {
    const char *limit, *figure;
  } limits[] = {{"time_s_max", "time_s"},
                {"deviation_mm_max", "deviation_max_mm"},
                {"deviation_rms_mm_max", "deviation_rms_mm"},
                {"saturated_pct_max", "saturated_pct"},
                {"reversals_per_s_max", "reversals_per_s"}};
  for (const auto& [limit, figure] : limits) {
    INFO(limit);
    const double value = drive[figure].get<double>();
    REQUIRE(value > 0.0);
    const auto with = [&, key = std::string(limit)](double bound) {  // clang 14 captures no binding itself
      return linewright("check " + scenario("heavy_cart") + " --set expect." + key + "=" + Json(bound).dump())
          .code;
    };
    CHECK(with(value) == 0);
    CHECK(with(value * (1.0 - 1e-12)) == 1);
  }
}

TEST_CASE("a line lost early is not a quick drive", "[shell]") {
  const std::string lost = scenario("too_fast");
  CHECK(linewright("check " + lost).code == 0);
  CHECK(linewright("check " + lost + " --set expect.outcome=finished").code == 1);
  const Json json = Json::parse(linewright("check --json " + lost + " --set expect.outcome=finished").out);
  CHECK(json["failed"] == 2);
}

TEST_CASE("a scenario that expects nothing passes with a note", "[shell]") {
  const Ran ran = linewright("check -", straight_text());
  CHECK(ran.code == 0);
  CHECK(ran.err == "linewright: stdin: expects nothing; add [expect]\n");
}

TEST_CASE("one bad file among many stops the check, and all bad ones are named", "[shell]") {
  const std::string bad = scratch("bad.toml"), report = scratch("unwritten.xml");
  save(bad, "format = 1\n");
  const Ran ran = linewright("check --json '" + bad + "' " + scenario("straight") + " absent.toml --junit '" +
                             report + "'");
  CHECK(ran.code == 2);
  CHECK(ran.out.empty());
  CHECK(ran.err.find("bad.toml:1: format") != std::string::npos);
  CHECK(ran.err.find("absent.toml: cannot be opened") != std::string::npos);
  CHECK(load(report).empty());
}

TEST_CASE("a report is XML that another program reads, whatever the names hold", "[shell]") {
  const std::string file = scratch("a <b> & \"c\".toml"), report = scratch("report.xml");
  save(file, expecting("outcome = \"finished\"\ndeviation_rms_mm_max = 0.0\ntime_s_max = 1.0\n"));
  CHECK(linewright("check '" + file + "' " + scenario("straight") + " --junit '" + report + "'").code == 1);
  CHECK(load(report).find("a &lt;b&gt; &amp; &quot;c&quot;.toml") != std::string::npos);
  const std::string python = python_with("tomllib", "the report");
  if (python.empty()) return;
  CHECK(passes(python, "shell_check.py", "junit '" + report + "' '" + file + "'"));
}

TEST_CASE("text in a report is escaped", "[shell]") {
  CHECK(lw::shell::xml_text("a<b>&\"c\"") == "a&lt;b&gt;&amp;&quot;c&quot;");
  CHECK(lw::shell::xml_text("gr\xC3\xBC\xC3\x9F") == "gr\xC3\xBC\xC3\x9F");
  CHECK(lw::shell::xml_text("a\nb\x01\x7F") == "a?b??");
  CHECK(lw::shell::xml_text("\xFF") == "?");
}

TEST_CASE("an expectation that needs an engine of a later version never passes in silence", "[shell]") {
  const Ran ran = linewright("check --json -", expecting("stress_share_min = 0.9\noutcome = \"finished\"\n"));
  CHECK(ran.code == 2);
  CHECK(ran.out.empty());
  CHECK(ran.err.find("this version cannot assert it, and does not pass over it") != std::string::npos);
}

TEST_CASE("a gain margin is a limit from below, and an unstable loop fails it with the reason", "[shell]") {
  const Ran kept = linewright("check -", expecting("gain_margin_db_min = 6.0\n"));
  CHECK(kept.code == 0);
  const Ran missed = linewright("check -", expecting("gain_margin_db_min = 60.0\n"));
  CHECK(missed.code == 1);
  CHECK(missed.out.find("expected at least 60") != std::string::npos);
  const Ran unstable = linewright("check - --set controller.kp=3", expecting("gain_margin_db_min = 1.0\n"));
  CHECK(unstable.code == 1);
  CHECK(unstable.out.find("the linear loop on the straight is not stable") != std::string::npos);
}
