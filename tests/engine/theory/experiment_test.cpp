// The linear loop against the drive itself, nonlinear and stepped, on a straight with small swings.
#include "tests/engine/theory/experiment.h"

#include "engine/theory/margins.h"
#include "engine/theory/poles.h"

using namespace lw;
using namespace lw::test;

namespace {

// Sensors away from the borders of the raster's cells: there the drive's brightness steps by a little, which
// swings smaller than a cell take for a slope.
Scenario of_scheme(Scheme scheme, double period_ms, double delay_ms) {
  Scenario scenario = experiment(period_ms, delay_ms);
  scenario.sensors.scheme = scheme;
  if (scheme == Scheme::edge) {
    scenario.sensors.lateral_mm = {2.0};
    scenario.sensors.target_pct = 48.0;
  } else if (scheme == Scheme::bar) {
    scenario.sensors.spot_mm = 16.0;
    scenario.sensors.lateral_mm = {53.0, 37.0, 21.0, 5.0, -5.0, -21.0, -37.0, -53.0};
    scenario.course.line_mm = 42.0;
  }
  return scenario;
}

}  // namespace

TEST_CASE("the drive swings on from the critical gain that the theory gives, and at its pace") {
  for (const Scheme scheme : {Scheme::pair, Scheme::edge, Scheme::bar}) {
    for (const double period_ms : {1.0, 5.0, 20.0}) {
      for (const double delay_ms : {0.0, 3.3, 7.5, 20.0}) {
        CAPTURE(static_cast<int>(scheme), period_ms, delay_ms);
        Scenario scenario = of_scheme(scheme, period_ms, delay_ms);
        const SampledLoop loop = loop_of(scenario);
        const Critical alone = critical(loop);
        REQUIRE(alone.gain);
        scenario.drive.start_offset_mm += 1e3 * loop.rest;
        Experiment drive(scenario);
        CHECK(drive.critical_gain(*alone.gain, *alone.period, loop.rest) ==
              Approx(*alone.gain).epsilon(0.005));
        for (const double share : {0.8, 1.2}) {
          const SampledLoop at = with_gains(loop, {share * *alone.gain, 0.0, 0.0});
          const PoleMotion motion = motion_of(poles(at).front(), at.period);
          const double swing = 2.0 * pi / motion.frequency;
          const double growth = drive.growth(share * *alone.gain, swing, loop.rest, 3.0 * swing, 2);
          // as damping, the share of the natural frequency
          CHECK(-growth / motion.frequency == Approx(motion.damping).margin(0.01));
        }
      }
    }
  }
}

// Small gains are stable up to a speed only: forward over speed has to exceed all that comes late.
TEST_CASE("the drive swings up on P alone above the theory's speed limit and not below it") {
  Scenario scenario = experiment(5.0, 7.5);
  scenario.sensors.forward_mm = 20.0;
  const SampledLoop loop = loop_of(scenario);
  const SpeedLimit limit = speed_limit(loop);
  REQUIRE(limit.base < 0.9);
  for (const double share : {0.8, 1.25}) {
    CAPTURE(share);
    SampledLoop at = loop;
    set_base(at, share * limit.base);
    CHECK(critical(at).gain.has_value() == (share < 1.0));
    scenario.controller.base_pct = 1e2 * at.base;
    const double kp = share < 1.0 ? 0.3 * *critical(at).gain : 0.02;
    at = with_gains(at, {kp, 0.0, 0.0});
    const PoleMotion motion = motion_of(poles(at).front(), at.period);
    const double swing = 2.0 * pi / motion.frequency;
    Experiment drive(scenario);
    CHECK((drive.growth(kp, swing, 0.0, swing, 2) > 0.0) == (share > 1.0));
  }
}
