#include "engine/tuning/experiment.h"

#include <algorithm>
#include <cmath>

#include "engine/tuning/oscillation.h"

namespace lw {
namespace {

constexpr int settling_periods = 3;
constexpr int measured_periods = 5;  // of each of the two stretches that are compared
constexpr double raised_by = 1.5;
constexpr int most_raised = 60, most_lowered = 8;
constexpr double much_limited = 0.3;  // share of loops
constexpr std::size_t most_rows = 60000;
constexpr double coarse = 0.02;  // share of the gain
constexpr double shrunk_by = 0.4;
constexpr double least_share = 0.005;  // of the small amplitude, below which it is shrunk no further
constexpr double well_below = 0.6, well_above = 1.7;  // the amplitude wanted: has died out, has grown
constexpr double far_below = 0.3, far_above = 4.0;    // while the push is not matched to it
constexpr double grown = 5.0;                         // times the push: grows, without a closer look
constexpr double died = 0.18;  // share of the push; a bar may wander on in the blind space between two spots

/// What one swing showed.
struct Seen {
  double growth = 0.0;    // 1/s; its sign is the verdict
  bool measured = false;  // period and amplitude are those of an oscillation
  double period = 0.0, amplitude = 0.0, error_amplitude = 0.0, steer_amplitude = 0.0, limited = 0.0;
};

/// Watches a swing as it goes on, and says when enough has been seen.
class Watch {
 public:
  explicit Watch(double push) : push_(push) {}

  bool go_on(const std::vector<SwingRow>& rows) {
    const double now = rows.back().deviation;
    peak_ = std::max(peak_, std::fabs(now));
    grew_ = std::fabs(now) > grown * push_;
    if (rows.size() == next_mark_) {
      died_ = peak_ < died * push_;
      peak_ = 0.0;
      next_mark_ *= 2;
    }
    if (rows.size() > 1 && rows[rows.size() - 2].deviation < 0.0 && now >= 0.0) ++rises_;
    return !grew_ && !died_ && rises_ <= settling_periods + 2 * measured_periods + 1;
  }

  bool has_grown() const { return grew_; }
  bool has_died() const { return died_; }

 private:
  // The largest deviation is taken between marks, each twice as late as the one before: a cosine, however
  // slow, reaches half its amplitude between two of them.
  double push_, peak_ = 0.0;
  std::size_t next_mark_ = 40;  // row
  int rises_ = 0;
  bool grew_ = false, died_ = false;
};

template <class Value>
std::vector<double> column(const std::vector<SwingRow>& rows, Value value) {
  std::vector<double> out;
  out.reserve(rows.size());
  for (const SwingRow& row : rows) out.push_back(value(row));
  return out;
}

double largest(const std::vector<double>& x, std::size_t first, std::size_t end) {
  double most = 0.0;
  for (std::size_t i = first; i < end; ++i) most = std::max(most, std::fabs(x[i]));
  return most;
}

/// `matched`: the push is one that leaves a swing of the amplitude wanted.
Seen seen_of(const std::vector<SwingRow>& rows, const Watch& watch, double wanted, bool matched) {
  Seen seen;
  const auto t = column(rows, [](const SwingRow& row) { return row.t; });
  const auto deviation = column(rows, [](const SwingRow& row) { return row.deviation; });
  for (const SwingRow& row : rows) seen.limited += row.limited ? 1.0 : 0.0;
  seen.limited /= static_cast<double>(rows.size());
  const double span = t.back() + 1e-12;
  if (watch.has_grown() || watch.has_died()) {
    seen.growth = std::log(watch.has_grown() ? grown : died) / span;
    return seen;
  }
  std::vector<double> up = rises(t, deviation, 0.0);
  if (up.size() > settling_periods) up.erase(up.begin(), up.begin() + settling_periods - 1);
  const auto period = mean_period(up);
  const auto whole = period ? oscillation_of(t, deviation, *period, measured_periods) : std::nullopt;
  if (!whole) {  // it did not swing long enough to be measured: the end against the start
    const std::size_t fifth = rows.size() / 5;
    const double before = largest(deviation, 0, fifth + 1),
                 after = largest(deviation, 4 * fifth, rows.size());
    seen.growth = std::log(std::max(after, 1e-12) / before) / span;
    return seen;
  }
  const auto amplitude_of = [&](const std::vector<double>& x) {
    const auto found = oscillation_of(t, x, whole->period, measured_periods);
    return found ? found->amplitude : 0.0;
  };
  seen.measured = true;
  seen.growth = whole->growth;
  const double size = whole->amplitude / wanted;
  if (size < (matched ? well_below : far_below) || size > (matched ? well_above : far_above))
    seen.growth = std::log(size) / span;
  seen.period = whole->period;
  seen.amplitude = whole->amplitude;
  seen.error_amplitude = amplitude_of(column(rows, [](const SwingRow& row) { return row.error; }));
  seen.steer_amplitude = amplitude_of(column(rows, [](const SwingRow& row) { return row.steer; }));
  return seen;
}

/// An experiment under way.
struct Bench {
  const Straight& straight;
  const ExperimentSetting& setting;
  double wanted;         // m, amplitude
  double push;           // m
  bool matched = false;  // the push leaves a swing of the amplitude wanted
  int trials = 0;

  LoopGains gains(double gain) const {
    return setting.sought == Sought::kp ? LoopGains{gain, 0.0, 0.0} : LoopGains{setting.kp, gain, 0.0};
  }

  Seen one(double gain, int draw) {
    ++trials;
    Watch watch(push);
    SwingSetting drive;
    drive.gains = gains(gain);
    drive.offset = push;
    drive.draw = static_cast<std::uint64_t>(draw);
    const auto rows = swing(straight, drive, most_rows,
                            [&](const std::vector<SwingRow>& so_far) { return watch.go_on(so_far); });
    return seen_of(rows, watch, wanted, matched);
  }

  /// The mean over all draws.
  Seen mean(double gain) {
    Seen mean = one(gain, 0);
    for (int draw = 1; draw < setting.draws; ++draw) {
      const Seen next = one(gain, draw);
      const double share = 1.0 / (draw + 1);
      mean.growth += share * (next.growth - mean.growth);
      mean.limited += share * (next.limited - mean.limited);
      if (!next.measured) continue;
      if (!mean.measured) {
        const double growth = mean.growth;
        mean = next;
        mean.growth = growth;
        continue;
      }
      mean.period += share * (next.period - mean.period);
      mean.amplitude += share * (next.amplitude - mean.amplitude);
      mean.error_amplitude += share * (next.error_amplitude - mean.error_amplitude);
      mean.steer_amplitude += share * (next.steer_amplitude - mean.steer_amplitude);
    }
    return mean;
  }
};

/// How far the gain found strays from draw to draw: each draw's growth at the gain over how steeply growth
/// rises with the gain.
double scatter_of(Bench& bench, double gain) {
  const int draws = bench.setting.draws;
  double sum = 0.0, squares = 0.0;
  for (int draw = 0; draw < draws; ++draw) {
    const double growth = bench.one(gain, draw).growth;
    sum += growth;
    squares += growth * growth;
  }
  const double variance = (squares - sum * sum / draws) / (draws - 1);
  const double steepness = (bench.mean(1.1 * gain).growth - bench.mean(0.9 * gain).growth) / 0.2;
  return steepness > 0.0 ? std::sqrt(std::max(0.0, variance)) / steepness : 0.0;
}

struct Bracket {
  double low = 0.0, high = 0.0;  // dies out at low, grows at high
};

/// A gain to begin with: the push, as the sensors see it, calls for a hundredth of the command that is left.
double first_gain(const Straight& straight, const ExperimentSetting& setting, double push) {
  const double error = std::max(push * swing_slope(straight, push), 1e-9);
  const double room = std::max(0.05, 1.0 - straight.loop.base);
  const double kp = 0.01 * room / error;
  return setting.sought == Sought::kp ? kp : 1e-4 * setting.kp;
}

/// Raises the gain until the swing grows, from the first at which it dies out; nothing when it never does.
/// high = 0 when it never grows. A swing that is small only because the commands have no more to give has not
/// died out.
std::optional<Bracket> bracket_from(Bench& bench, double gain) {
  std::optional<Bracket> bracket;
  const auto look = [&](double at) {
    const Seen seen = bench.mean(at);
    if (seen.growth < 0.0 && seen.limited < much_limited) bracket = Bracket{at, 0.0};
    return seen;
  };
  double at = gain;
  for (int i = 0; i < most_raised && !bracket; ++i, at *= raised_by)
    if (look(at).limited > much_limited) break;
  at = gain / raised_by;
  for (int i = 0; i < most_lowered && !bracket; ++i, at /= raised_by) look(at);
  if (!bracket) return {};
  for (int i = 0; i < most_raised && bracket->high == 0.0; ++i) {
    const double higher = bracket->low * raised_by;
    (bench.mean(higher).growth > 0.0 ? bracket->high : bracket->low) = higher;
  }
  return bracket;
}

/// Searches outwards from a gain, at first in small steps. Nothing when everything below grows; high = 0 when
/// everything above dies out.
std::optional<Bracket> bracket_near(Bench& bench, double gain) {
  const bool grows = bench.mean(gain).growth > 0.0;
  Bracket bracket{gain, gain};
  double factor = 1.02;
  for (int i = 0; i < 8; ++i, factor *= factor) {
    double& end = grows ? bracket.low : bracket.high;
    double& other = grows ? bracket.high : bracket.low;
    other = end;
    end = grows ? gain / factor : gain * factor;
    if ((bench.mean(end).growth > 0.0) != grows) return bracket;
  }
  if (grows) return {};
  return Bracket{bracket.high, 0.0};
}

double bisected(Bench& bench, Bracket bracket, double tolerance) {
  while (bracket.high - bracket.low > tolerance * bracket.high) {
    const double middle = 0.5 * (bracket.low + bracket.high);
    (bench.mean(middle).growth > 0.0 ? bracket.high : bracket.low) = middle;
  }
  return 0.5 * (bracket.low + bracket.high);
}

std::string without_gain(const std::optional<Bracket>& bracket, const char* gain) {
  if (!bracket) return std::string("the swing grows however small ") + gain + " is: nothing to close in on";
  return std::string("the swing dies out however large ") + gain + " is: it never grows past what was pushed";
}

void note(CriticalFound& found, const Seen& seen) {
  found.period = seen.period;
  found.amplitude = seen.amplitude;
  found.error_amplitude = seen.error_amplitude;
  found.steer_amplitude = seen.steer_amplitude;
  found.limited = seen.limited;
}

/// One pass at one push. Sets the gain, or the reason why there is none.
void close_in(Bench& bench, const std::optional<Bracket>& bracket, double tolerance, CriticalFound& found) {
  found.gain.reset();
  found.push = bench.push;
  if (!bracket || bracket->high == 0.0) {
    found.reason = without_gain(bracket, bench.setting.sought == Sought::kp ? "Kp" : "Ki");
  } else {
    found.gain = bisected(bench, *bracket, tolerance);
    note(found, bench.mean(*found.gain));
  }
  found.trials = bench.trials;
}

/// One amplitude: first coarsely, to learn what swing a push leaves; then with the push that leaves the swing
/// wanted.
CriticalFound at_amplitude(const Straight& straight, const ExperimentSetting& setting, double wanted) {
  Bench bench{straight, setting, wanted, wanted};
  CriticalFound found;
  found.wanted = wanted;
  double near = setting.near;
  if (near > 0.0) {
    bench.push = setting.push;
  } else {
    close_in(bench, bracket_from(bench, first_gain(straight, setting, wanted)), coarse, found);
    if (!found.gain) return found;
    near = *found.gain;
    if (found.amplitude > 0.0) bench.push *= wanted / found.amplitude;
  }
  bench.matched = true;
  close_in(bench, bracket_near(bench, near), setting.tolerance, found);
  if (found.gain && setting.draws > 1) found.scatter = scatter_of(bench, *found.gain);
  found.trials = bench.trials;
  return found;
}

}  // namespace

CriticalFound critical_by_experiment(const Straight& straight, const ExperimentSetting& setting) {
  if (setting.amplitude > 0.0) return at_amplitude(straight, setting, setting.amplitude);
  const double small = small_amplitude(straight);
  CriticalFound found = at_amplitude(straight, setting, small);
  for (double amplitude = shrunk_by * small; found.limited > 0.0 && amplitude > least_share * small;
       amplitude *= shrunk_by) {
    if (swing_slope(straight, amplitude) < 0.5 * straight.loop.slope) break;  // a bar's blind space
    CriticalFound smaller = at_amplitude(straight, setting, amplitude);
    smaller.trials += found.trials;
    if (!smaller.gain) break;
    found = smaller;
  }
  found.small = small;
  return found;
}

}  // namespace lw
