// The relay experiment, on a process with an exact critical gain and on the vehicle's own loop.
#include "tests/engine/tuning/relays.h"

#include <complex>

#include "engine/theory/margins.h"
#include "engine/tuning/tune.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

TEST_CASE("a relay switches beyond its hysteresis and keeps its side within") {
  Relay relay{0.2, 0.05, 0.0};
  CHECK(switched(relay, 0.01) == 0.2);
  CHECK(switched(relay, -0.04) == 0.2);
  CHECK(switched(relay, -0.06) == -0.2);
  CHECK(switched(relay, 0.04) == -0.2);
  CHECK(switched(relay, 0.051) == 0.2);
}

// The describing function counts the first harmonic alone; here the third comes back with
// |P(3 omega)| / |P(omega)| / 3 = 0.0160 of the first (by hand: (4 / 28)^1.5 / 3 = 0.018 at omega = sqrt 3),
// so a few per cent are to be expected.
TEST_CASE("a relay on 1/(s+1)^3 finds its critical gain of 8 and period of 2 pi / sqrt 3") {
  const RelaySamples samples = relay_on_three_lags(1.0, 0.0, 1e-3);
  const auto reading = relay_reading(samples.t, samples.error, samples.output, 1.0, 0.0);
  REQUIRE(reading);
  CHECK(reading->gain == Approx(lags_critical_gain).epsilon(0.05));
  CHECK(reading->period == Approx(lags_critical_period).epsilon(0.02));
  CHECK(std::abs(reading->late) < 0.03);  // the third harmonic moves the crossings a little
  // Without the describing function: first harmonic over first harmonic is the process's gain there.
  const double omega = 2.0 * M_PI / reading->period;
  CHECK(reading->first_harmonic_gain == Approx(std::pow(1.0 + omega * omega, 1.5)).epsilon(2e-3));
}

TEST_CASE("hysteresis makes the oscillation slower, and its formula still finds the real axis") {
  double before = 0.0;
  for (const double share : {0.0, 0.1, 0.3}) {
    CAPTURE(share);
    const double hysteresis = share * 4.0 / (M_PI * lags_critical_gain);
    const RelaySamples samples = relay_on_three_lags(1.0, hysteresis, 1e-3);
    const auto reading = relay_reading(samples.t, samples.error, samples.output, 1.0, hysteresis);
    REQUIRE(reading);
    CHECK(reading->period > before);
    before = reading->period;
    CHECK(reading->late == Approx(std::asin(hysteresis / reading->amplitude)).margin(0.03));
    const std::complex<double> at =
        1.0 / std::pow(std::complex<double>(1.0, 2.0 * M_PI / reading->period), 3.0);
    CHECK(reading->gain == Approx(-1.0 / at.real()).epsilon(0.05));
  }
}

TEST_CASE("samples without an oscillation give no reading") {
  const RelaySamples samples = relay_on_three_lags(1.0, 0.0, 1e-2);
  CHECK_FALSE(relay_reading({0.0, 1.0}, {0.0, 1.0}, {1.0, 1.0}, 1.0, 0.0));
  CHECK_FALSE(relay_reading(samples.t, samples.error, samples.output, 1.0, 10.0));  // all within hysteresis
}

TEST_CASE("the vehicle under a relay meets the loop of the theory at the relay's frequency") {
  for (const bool edge : {false, true}) {
    for (const double period_ms : {1.0, 5.5, 20.0}) {
      for (const double delay_ms : {0.0, 7.5, 20.0}) {
        CAPTURE(edge, period_ms, delay_ms);
        const auto straight =
            make_straight(edge ? edge_cart(period_ms, delay_ms) : cart(period_ms, delay_ms));
        REQUIRE(straight);
        const RelayFound found = relay_experiment(*straight, {});
        REQUIRE(found.reading);
        const std::complex<double> path = path_response(straight->loop, 2.0 * M_PI / found.reading->period);
        const double slope = straight->loop.slope / swing_slope(*straight, found.amplitude);
        CHECK(found.reading->first_harmonic_gain * std::abs(path) == Approx(slope).epsilon(0.01));
        CHECK(found.reading->late == Approx(M_PI + std::arg(path)).margin(0.01));

        const Critical theory = critical(straight->loop);
        const RelayParts parts = relay_parts(*straight, found, *theory.gain);
        CHECK(parts.frequency * parts.slope * parts.formula ==
              Approx(found.reading->gain / *theory.gain).epsilon(1e-12));
        CHECK(std::abs(parts.formula - 1.0) < 0.05);  // the describing-function error
        CHECK(parts.frequency < 1.0);                 // late, hence slower and at a larger gain of the loop
      }
    }
  }
}

TEST_CASE("the words of a relay experiment give both figures and the reasons of their difference") {
  const auto study = study_relay(cart(5.5, 7.5));
  REQUIRE(study);
  std::string words;
  for (const std::string& sentence : study->words) words += sentence + '\n';
  for (const char* part : {"Theory has Kp", "switch", "describing-function error", "as it is"})
    CHECK(words.find(part) != std::string::npos);
}
