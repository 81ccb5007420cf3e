// `linewright drive`: keys, trace, overrides, and where a scenario may come from.
#include <cmath>
#include <sstream>
#include <vector>

#include "tests/catch.h"
#include "tests/outside/python.h"
#include "tests/shell/calls.h"

using namespace lw::test;

namespace {

std::vector<std::vector<std::string>> table_of(const std::string& csv) {
  std::vector<std::vector<std::string>> rows;
  std::istringstream lines(csv);
  for (std::string line; std::getline(lines, line);) {
    rows.emplace_back();
    std::istringstream cells(line);
    for (std::string cell; std::getline(cells, cell, ',');) rows.back().push_back(cell);
  }
  return rows;
}

double at(const std::vector<std::string>& row, std::size_t column) { return std::stod(row[column]); }

}  // namespace

TEST_CASE("the JSON of a drive has the keys of the contract in their order", "[shell]") {
  const Json json = json_from("drive --json " + scenario("circle_left"));
  CHECK(keys_of(json) ==
        "outcome time_s progress_mm deviation_mean_mm deviation_rms_mm deviation_max_mm error_mean "
        "saturated_pct "
        "reversals_per_s slid steps trace_hash reason");
  CHECK(json["outcome"] == "finished");
  CHECK(json["slid"] == false);
  CHECK(json["steps"].is_number_integer());
  CHECK(json["time_s"].get<double>() == Approx(0.004 * (json["steps"].get<double>() - 1)));
  const auto hash = json["trace_hash"].get<std::string>();
  CHECK(hash.size() == 16);
  CHECK(hash.find_first_not_of("0123456789abcdef") == std::string::npos);
  CHECK(json["reason"].get<std::string>().substr(0, 11) == "finishes in");
  // A fraction of full scale, and not a percentage: steady error = steer / kp on a circle of 300 mm.
  CHECK(std::fabs(json["error_mean"].get<double>()) < 0.5);
}

TEST_CASE("what is printed for people says the same as the JSON", "[shell]") {
  const Json json = json_from("drive --json " + scenario("heavy_cart"));
  const Ran ran = linewright("drive " + scenario("heavy_cart"));
  CHECK(ran.code == 0);
  CHECK(ran.out.find(json["trace_hash"].get<std::string>()) != std::string::npos);
  CHECK(ran.out.find(json["reason"].get<std::string>()) != std::string::npos);
  CHECK(ran.out.find("tyres slid       yes\n") != std::string::npos);
}

TEST_CASE("a trace has the columns of the contract and one row a loop", "[shell]") {
  const std::string file = scratch("trace.csv");
  const Json json = json_from("drive --json " + scenario("bar") + " --trace '" + file + "'");
  const auto rows = table_of(load(file));
  const std::string header = load(file).substr(0, load(file).find('\n'));
  CHECK(header ==
        "t_s,x_mm,y_mm,heading_deg,progress_mm,deviation_mm,speed_mm_s,yaw_rate_deg_s,error,p,i,d,steer,left,"
        "right,"
        "reading_0,reading_1,reading_2,reading_3,reading_4,reading_5,reading_6,reading_7");
  REQUIRE(rows.size() == json["steps"].get<std::size_t>() + 1);
  double most = 0.0, squares = 0.0;
  for (std::size_t i = 1; i < rows.size(); ++i) {
    REQUIRE(rows[i].size() == 23);
    most = std::fmax(most, std::fabs(at(rows[i], 5)));
    squares += at(rows[i], 5) * at(rows[i], 5);
  }
  CHECK(most == Approx(json["deviation_max_mm"].get<double>()));
  CHECK(std::sqrt(squares / static_cast<double>(rows.size() - 1)) ==
        Approx(json["deviation_rms_mm"].get<double>()));
  CHECK(at(rows.back(), 0) == json["time_s"].get<double>());
  CHECK(at(rows.back(), 4) == json["progress_mm"].get<double>());
  CHECK(at(rows[1], 0) == 0.0);
}

TEST_CASE("the figures of a drive follow from its trace, worked out by another program", "[shell]") {
  const std::string python = python_with("tomllib", "the trace");
  if (python.empty()) return;
  for (const std::string name : {"bar", "noise", "crossing", "heavy_cart", "too_fast", "slow_loop"}) {
    INFO(name);
    const std::string trace = scratch("outside.csv"), json = scratch("outside.json");
    save(json, linewright("drive --json " + scenario(name) + " --trace '" + trace + "'").out);
    CHECK(passes(python, "shell_check.py", "csv '" + trace + "' '" + json + "'"));
  }
}

TEST_CASE("two traces of one drive are equal in every bit, and a changed one is not", "[shell]") {
  const std::string a = scratch("a.bits"), b = scratch("b.bits"), c = scratch("c.bits");
  CHECK(linewright("drive " + scenario("noise") + " --trace-bits '" + a + "'").code == 0);
  CHECK(linewright("drive " + scenario("noise") + " --trace-bits '" + b + "'").code == 0);
  CHECK(linewright("drive " + scenario("noise") + " --set drive.seed=6 --trace-bits '" + c + "'").code == 0);
  CHECK_FALSE(load(a).empty());
  CHECK(load(a) == load(b));
  CHECK(load(a) != load(c));
}

TEST_CASE("any key can be overridden, and a later override wins", "[shell]") {
  const std::string straight = scenario("straight");
  const auto hash = [&](const std::string& set) {
    return json_from("drive --json " + straight + set)["trace_hash"].get<std::string>();
  };
  const std::string plain = hash("");
  CHECK(hash(" --set controller.kp=0.25") == plain);
  CHECK(hash(" --set controller.kp=0.26") != plain);
  CHECK(hash(" --set controller.kp=0.26 --set controller.kp=0.25") == plain);
  CHECK(hash(" --set 'sensors.lateral_mm=[9, -9]'") ==
        hash(" --set sensors.lateral_mm[0]=9 --set sensors.lateral_mm[1]=-9"));
  CHECK(hash(" --set vehicle.wheel_left_mm=60.5") != plain);
  CHECK(hash(" --set controller.gains=per_second") == plain);  // with kp alone both count the same
  CHECK(json_from("drive --json " + straight + " --set drive.time_limit_s=1")["outcome"] == "time_out");
}

TEST_CASE("a scenario comes from a file, stdin or a link, to the same drive", "[shell]") {
  const std::string file = scenario("s_bends");
  const std::string text = load(LINEWRIGHT_SOURCE_DIR "/scenarios/s_bends.toml");
  const Ran link = linewright("link " + file);
  REQUIRE(link.code == 0);
  const std::string address = link.out.substr(0, link.out.size() - 1);
  const auto hash = json_from("drive --json " + file)["trace_hash"];
  CHECK(json_from("drive --json -", text)["trace_hash"] == hash);
  CHECK(json_from("drive --json '" + address + "'")["trace_hash"] == hash);
  CHECK(json_from("drive --json '" + address.substr(address.find('#') + 1) + "'")["trace_hash"] == hash);
  CHECK(json_from("drive --json -", link.out)["trace_hash"] == hash);
  const std::string kept = scratch("kept.link");
  save(kept, link.out);
  CHECK(json_from("drive --json '" + kept + "'")["trace_hash"] == hash);
}

TEST_CASE("a lost line is a result and not an error", "[shell]") {
  const Json json = json_from("drive --json " + scenario("too_fast"));
  CHECK(json["outcome"] == "line_lost");
  CHECK(json["reason"] == "leaves the line at 1.65 m: steer saturated in the 150 mm bend");
}
