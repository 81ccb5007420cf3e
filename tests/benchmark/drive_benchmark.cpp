// How long one drive takes: 30 s at 188 loops a second, the floor raster not counted.
//
//   linewright_benchmark
//   linewright_benchmark search   the gain search against every published rule (search_table.h)
//
// Every figure is the median of interleaved rounds, so that a machine that speeds up or slows down meets all
// rows alike. The ratio to the first row is what can be quoted; milliseconds belong to the machine at hand.
#include <algorithm>
#include <cstdio>
#include <cstring>
#include <ctime>
#include <vector>

#include "build_info.h"
#include "engine/drive/drive.h"
#include "tests/benchmark/search_table.h"

namespace {

using namespace lw;

Scenario cart_on_oval() {
  Scenario scenario;
  scenario.loop.period_ms = 1e3 / 188.0;
  scenario.drive.time_limit_s = 30.0;
  scenario.drive.laps = 1000;
  const Piece straight{1200.0, {}, {}}, bend{{}, 400.0, 180.0};
  scenario.course.pieces = {straight, bend, straight, bend};
  scenario.controller.ki = 0.004;
  return scenario;
}

struct Case {
  const char* name;
  Scenario scenario;
  bool trace = false;
  std::vector<double> ms{};
  long steps = 0;
};

std::vector<Case> cases() {
  const Scenario plain = cart_on_oval();
  std::vector<Case> all{{"plain", plain}, {"plain, with trace", plain, true}};
  const auto add = [&](const char* name, auto change) {
    Scenario scenario = plain;
    change(scenario);
    all.push_back({name, scenario});
  };
  add("noise", [](Scenario& s) { s.sensors.noise_pct = 0.5; });
  add("jitter", [](Scenario& s) { s.loop.jitter_pct = 10.0; });
  add("command delay", [](Scenario& s) { s.vehicle.command_delay_ms = 3.0; });
  add("grip", [](Scenario& s) { s.vehicle.grip = 0.6; });
  add("filtered D", [](Scenario& s) { s.controller.kd = 0.5, s.controller.derivative_filter_ms = 10.0; });
  add("bar of 7", [](Scenario& s) {
    s.sensors.scheme = Scheme::bar;
    s.sensors.lateral_mm = {30, 20, 10, 0, -10, -20, -30};
    s.controller.kp = 0.01;
  });
  return all;
}

double milliseconds_of(Case& one, const Plan& plan) {
  Trace trace;
  const std::clock_t begin = std::clock();
  const Summary summary = drive(plan, one.trace ? &trace : nullptr);
  const double taken = 1e3 * static_cast<double>(std::clock() - begin) / CLOCKS_PER_SEC;
  one.steps = static_cast<long>(summary.steps);
  if (summary.outcome != Outcome::time_out) std::printf("%s: did not drive its 30 s\n", one.name);
  return taken;
}

double median(std::vector<double> values) {
  std::nth_element(values.begin(), values.begin() + static_cast<long>(values.size() / 2), values.end());
  return values[values.size() / 2];
}

}  // namespace

int main(int argc, char** argv) {
  std::printf("%s\n", build_info);
  if (argc == 2 && std::strcmp(argv[1], "search") == 0) return benchmark::print_search_table() == 0 ? 0 : 1;
  std::vector<Case> all = cases();
  std::vector<Plan> plans;
  for (const Case& one : all) plans.push_back(*make_plan(one.scenario));
  for (int round = 0; round < 31; ++round) {
    for (std::size_t i = 0; i < all.size(); ++i) all[i].ms.push_back(milliseconds_of(all[i], plans[i]));
  }
  const double first = median(all[0].ms);
  std::printf("%-20s %8s %10s %10s %7s\n", "one drive of 30 s", "loops", "ms", "ns a loop", "ratio");
  for (const Case& one : all) {
    const double ms = median(one.ms);
    std::printf("%-20s %8ld %10.3f %10.1f %7.2f\n", one.name, one.steps, ms,
                1e6 * ms / static_cast<double>(one.steps), ms / first);
  }
}
