// tune --method search, by its function: keys, limits, refusals, and that its answer can be driven.
#include "shell/commands.h"
#include "tests/catch.h"
#include "tests/shell/calls.h"

using namespace lw::test;
using lw::shell::Answer;
using lw::shell::SearchCall;

namespace {

SearchCall call_on(const std::string& name) {
  SearchCall call;
  call.input.from = std::string(LINEWRIGHT_SOURCE_DIR "/scenarios/") + name + ".toml";
  call.free = {"kp", "base=20:60"};
  call.evaluations = 40;
  return call;
}

std::string refusal(const SearchCall& call) {
  const Answer answer = lw::shell::search_command(call);
  REQUIRE(answer.errors.size() == 1);
  return lw::text_of(answer.errors[0]);
}

}  // namespace

TEST_CASE("a search answers with gains, evidence and words to drive it by", "[shell]") {
  SearchCall call = call_on("circle_left");
  call.free = {"kp,base=20:60"};  // as one word or as several
  call.limits = {"gain_margin_db=6,deviation_mm=6"};
  const Answer answer = lw::shell::search_command(call);
  REQUIRE(answer.errors.empty());
  CHECK(keys_of(answer.json) == "method kp ki kd filter evidence");
  const Json& evidence = answer.json["evidence"];
  CHECK(evidence["best"]["keeps_limits"] == true);
  CHECK(evidence["best"]["gain_margin_db"].get<double>() >= 6.0);
  CHECK(evidence["front"].size() >= 1);
  CHECK(answer.text.find("To drive it: --set controller.kp=") != std::string::npos);

  std::string set;
  for (const Json& word : evidence["set"]) set += " --set '" + word.get<std::string>() + "'";
  const Json drive = json_from("drive --json" + set + " " + scenario("circle_left"));
  CHECK(drive["time_s"] == evidence["best"]["time_s"]);
  CHECK(drive["deviation_max_mm"] == evidence["best"]["deviation_max_mm"]);
}

TEST_CASE("words of a search that are none are refused with what there is", "[shell]") {
  SearchCall call = call_on("circle_left");
  call.free = {"kq"};
  CHECK(refusal(call) == "--free: kq: one of kp, ki, kd, filter, base, forward, spacing");
  call.free = {"kp=1"};
  CHECK(refusal(call) == "--free: kp=1: bounds are LOW:HIGH, such as kp=0.1:0.8");
  call.free = {"kp"};
  call.limits = {"time=3"};
  CHECK(refusal(call).find("--limit: time=3: NAME=VALUE with one of deviation_mm, ") == 0);
  call.limits = {"deviation_mm=-1"};
  CHECK(refusal(call) == "--limit: deviation_mm=-1: NAME=VALUE with a number from 0 on");
  call.limits = {};
  call.goal = "fun";
  CHECK(refusal(call) == "--goal: fun: time or deviation");
  call.goal = "time";
  call.free = {};
  CHECK(refusal(call) == "free: nothing is set free to be searched");
}

TEST_CASE("the same search by tune gives the same answer", "[shell]") {
  const std::string call =
      "tune --json --method search --free kp,ki --goal deviation --limit gain_margin_db=6 --evaluations 30 " +
      scenario("circle_left");
  const Json once = json_from(call);
  CHECK(once["evidence"]["evaluations"] == 30);
  CHECK(once == json_from(call));
}
