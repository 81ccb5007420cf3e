// Published settings against worked figures, and what is made of them when they are tried.
#include "engine/tuning/rules.h"

#include <cmath>
#include <cstring>

#include "engine/tuning/tune.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

const Rule& rule_of(const char* name) {
  for (const Rule& rule : published_rules)
    if (std::strcmp(rule.name, name) == 0) return rule;
  FAIL("no rule " << name);
  return published_rules[0];
}

Tuning tuned(const Scenario& scenario, TuneMethod method) {
  Result<Tuning> tuning = tune(scenario, method);
  if (!tuning) FAIL(text_of(tuning.error()));
  return *tuning;
}

Scenario oval_cart() {
  Scenario scenario = on_oval();
  scenario.vehicle.command_delay_ms = 7.5;
  return scenario;
}

}  // namespace

// The integrator with dead time e^(-L s) / s has its critical point by hand at omega = pi / (2 L), where its
// gain is 2 L / pi: Ku = pi / (2 L), Pu = 4 L.
TEST_CASE("Ziegler and Nichols on the integrator with dead time") {
  const double dead = 0.8, ku = M_PI / (2.0 * dead), pu = 4.0 * dead;
  const SecondGains pi_law = gains_by(rule_of("Ziegler-Nichols PI"), ku, pu);
  CHECK(pi_law.kp == Approx(0.707 / dead).epsilon(1e-3));
  CHECK(pi_law.kp / pi_law.ki == Approx(3.333 * dead).epsilon(1e-3));  // Ti
  const SecondGains pid = gains_by(rule_of("Ziegler-Nichols PID"), ku, pu);
  CHECK(pid.kp == Approx(0.942 / dead).epsilon(1e-3));
  CHECK(pid.kp / pid.ki == Approx(2.0 * dead));
  CHECK(pid.kd / pid.kp == Approx(0.5 * dead));
}

// As tables in parallel form have them: PI ki = 0.54 Ku / Pu (Astrom and Murray, Feedback Systems, the
// original gains), PID ki = 1.2 Ku / Pu, kd = 0.075 Ku Pu.
TEST_CASE("rules in parallel form") {
  const SecondGains pi_law = gains_by(rule_of("Ziegler-Nichols PI"), 2.0, 0.5);
  CHECK(pi_law.ki == Approx(0.54 * 2.0 / 0.5));
  const SecondGains pid = gains_by(rule_of("Ziegler-Nichols PID"), 2.0, 0.5);
  CHECK(pid.ki == Approx(1.2 * 2.0 / 0.5));
  CHECK(pid.kd == Approx(0.075 * 2.0 * 0.5));
  const SecondGains p = gains_by(rule_of("Ziegler-Nichols P"), 2.0, 0.5);
  CHECK((p.kp == 1.0 && p.ki == 0.0 && p.kd == 0.0));
  const SecondGains tyreus = gains_by(rule_of("Tyreus-Luyben PI"), 3.2, 1.0);
  CHECK(tyreus.kp == Approx(1.0));
  CHECK(tyreus.ki == Approx(1.0 / 2.2));
}

// Astrom and Hagglund 1984: the critical point, -1 / Ku at 2 pi / Pu, is moved to where the phase margin is
// 45 degrees and the gain 1.
TEST_CASE("the setting for a phase margin of 45 degrees moves the critical point to where it should be") {
  const double ku = 3.0, pu = 0.7, omega = 2.0 * M_PI / pu;
  const SecondGains gains = gains_by(rule_of("Astrom-Hagglund PID, 45 deg"), ku, pu);
  const std::complex<double> law(gains.kp, gains.kd * omega - gains.ki / omega);
  const std::complex<double> moved = law * (-1.0 / ku);
  CHECK(std::abs(moved) == Approx(1.0).epsilon(1e-6));
  CHECK(std::arg(moved) == Approx(-0.75 * M_PI).epsilon(1e-6));
  CHECK(gains.kp / gains.ki == Approx(4.0 * gains.kd / gains.kp));
}

TEST_CASE("gains per second and per loop are one another's through the period") {
  const LoopGains loop = per_loop({0.4, 1.5, 0.02}, 0.005);
  CHECK(loop.kp == 0.4);
  CHECK(loop.ki == Approx(0.0075));
  CHECK(loop.kd == Approx(4.0));
  const SecondGains back = per_second(loop, 0.005);
  CHECK(back.ki == Approx(1.5));
  CHECK(back.kd == Approx(0.02));

  Scenario scenario = oval_cart();
  const Scenario by_loop = with_gains(scenario, loop, 0.01);
  scenario.controller.gains = GainUnit::per_second;
  const Scenario by_second = with_gains(scenario, loop, 0.01);
  CHECK(by_loop.controller.ki == Approx(0.0075));
  CHECK(by_second.controller.ki == Approx(1.5));
  CHECK(by_second.controller.derivative_filter_ms == Approx(10.0));
  const Summary one = drive(*make_plan(by_loop)), other = drive(*make_plan(by_second));
  CHECK(one.deviation_rms == Approx(other.deviation_rms).epsilon(1e-6));
}

TEST_CASE("D without a filter of its own gets a tenth of its time") {
  Scenario scenario = oval_cart();
  const LoopGains gains = per_loop({0.4, 0.0, 0.02}, 0.005);
  CHECK(filter_for(scenario, gains) == Approx(0.1 * 0.02 / 0.4));
  CHECK(filter_for(scenario, {0.4, 0.0, 0.0}) == 0.0);
  scenario.controller.derivative_filter_ms = 12.0;
  CHECK(filter_for(scenario, gains) == Approx(0.012));
}

// "P alone at half the critical gain runs a straight without growing" (common practice, no source).
TEST_CASE("half the critical gain is stable by 6 dB") {
  const Tuning tuning = tuned(oval_cart(), TuneMethod::habit);
  REQUIRE(tuning.trials.size() == 3);
  CHECK(tuning.trials[0].margins.stable);
  CHECK(decibels(*tuning.trials[0].margins.gain_high) == Approx(20.0 * std::log10(2.0)).epsilon(1e-6));
  CHECK(tuning.trials[1].gains.ki == Approx(0.5 * tuning.trials[2].gains.ki));
}

TEST_CASE("a rule that is unstable for this loop is shown as such and never recommended") {
  const Tuning tuning = tuned(oval_cart(), TuneMethod::rules);
  int unstable = 0;
  for (const Trial& trial : tuning.trials) {
    if (trial.margins.stable) continue;
    ++unstable;
    CHECK(trial.against.find("not stable") != std::string::npos);
  }
  CHECK(unstable >= 1);  // Ziegler-Nichols PI
  REQUIRE(tuning.choice.index);
  const Trial& best = tuning.trials[*tuning.choice.index];
  CHECK(best.margins.stable);
  CHECK(best.drive.outcome == Outcome::finished);
  CHECK(best.against.empty());
  CHECK(tuning.choice.reason.find(best.name) == 0);
}

TEST_CASE("the recommendation is the least deviation among those well inside, and never a contradicted one") {
  const auto trial = [](const char* name, double rms, double peak, const char* against, const char* edge) {
    Trial made;
    made.name = name;
    made.drive.deviation_rms = rms;
    made.margins.sensitivity_peak = peak;
    made.against = against;
    made.near_edge = edge;
    return made;
  };
  const Trial best = trial("best", 2e-3, 1.5, "", ""), edge = trial("edge", 1e-3, 5.0, "", "peak"),
              broken = trial("broken", 1e-4, 1.2, "unstable", ""),
              level = trial("level", 2.05e-3, 1.3, "", "");
  CHECK(*recommended({broken, edge, best}).index == 2);
  CHECK(*recommended({broken, edge, best, level}).index == 3);  // within 5 %, and calmer
  CHECK(*recommended({broken, edge}).index == 1);
  CHECK_FALSE(recommended({broken}).index);
  CHECK(recommended({broken}).reason.find("None is recommended") == 0);
}

TEST_CASE("where there is no critical gain nothing is recommended, with the reason") {
  Scenario scenario = oval_cart();
  scenario.sensors.forward_mm = 10.0;
  for (const TuneMethod method :
       {TuneMethod::rules, TuneMethod::critical, TuneMethod::relay, TuneMethod::habit}) {
    CAPTURE(static_cast<int>(method));
    const Tuning tuning = tuned(scenario, method);
    CHECK_FALSE(tuning.choice.index);
    CHECK(tuning.trials.empty());
    CHECK(tuning.choice.reason.find("no critical gain") != std::string::npos);
  }
}
