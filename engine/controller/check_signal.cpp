#include "engine/controller/check_signal.h"

#include <cmath>
#include <cstdlib>
#include <optional>

#include "engine/scenario/value_text.h"

namespace lw {
namespace {

constexpr double slack =
    1e-9;  // s, so that multiples of the period meet the ends of ramps in spite of rounding

std::string_view trimmed(std::string_view text) {
  const std::size_t first = text.find_first_not_of(" \t\n"), last = text.find_last_not_of(" \t\n");
  return first == std::string_view::npos ? std::string_view() : text.substr(first, last - first + 1);
}

std::optional<double> number_of_text(std::string_view text) {
  const std::string digits(trimmed(text));
  if (digits.empty() || digits.find_first_not_of("0123456789+-.eE") != std::string::npos) return {};
  char* end = nullptr;
  const double value = std::strtod(digits.c_str(), &end);
  if (end != digits.c_str() + digits.size() || !std::isfinite(value)) return {};
  return value;
}

Result<Knot> read_knot(std::string_view text) {
  const std::size_t at = text.find('@');
  const auto refused = [&](const char* rule) { return Error{"segments", clipped(trimmed(text)), rule}; };
  if (at == std::string_view::npos) return refused("an entry is LEVEL@SECONDS, such as 0.2@0.5");
  const auto level = number_of_text(text.substr(0, at)), duration = number_of_text(text.substr(at + 1));
  if (!level || !(std::fabs(*level) <= 1e6)) return refused("the level is a number within +-1e6");
  if (!duration || !(*duration >= 0.0 && *duration <= 1e6))
    return refused("the duration is a number of seconds, 0 to 1e6");
  return Knot{*level, *duration};
}

}  // namespace

Result<std::vector<Knot>> read_knots(std::string_view text) {
  std::vector<Knot> knots;
  for (bool more = true; more;) {
    const std::size_t comma = text.find(',');
    const Result<Knot> knot = read_knot(text.substr(0, comma));
    if (!knot) return knot.error();
    knots.push_back(*knot);
    if (knots.size() > most_knots) return Error{"segments", "", "at most 1000 entries"};
    more = comma != std::string_view::npos;
    if (more) text.remove_prefix(comma + 1);
  }
  return knots;
}

double signal_at(const std::vector<Knot>& knots, double t) {
  double level = 0.0, start = 0.0;
  for (const Knot& knot : knots) {
    const double end = start + knot.duration;
    if (t + slack < end) {
      const double share = t > start ? (t - start) / knot.duration : 0.0;
      return level + (knot.level - level) * share;
    }
    level = knot.level;
    start = end;
  }
  return level;
}

double duration_of(const std::vector<Knot>& knots) {
  double sum = 0.0;
  for (const Knot& knot : knots) sum += knot.duration;
  return sum;
}

Result<std::vector<SignalRow>> answer_to(const std::vector<Knot>& knots, const Law<double>& law,
                                         const LawWiring& wiring, double period) {
  const double loops = std::floor((duration_of(knots) + slack) / period) + 1.0;
  if (loops > most_signal_loops)
    return Error{"segments", number_text(duration_of(knots)) + " s",
                 "more than a million loops at this period"};
  std::vector<SignalRow> rows;
  LawState<double> state{};
  for (double k = 0.0; k < loops; k += 1.0) {
    SignalRow row;
    row.t = k * period;
    row.error = signal_at(knots, row.t);
    const Terms<double> terms = control(law, wiring, row.error, period, k == 0.0, state);
    row.p = terms.p;
    row.i = terms.i;
    row.d = terms.d;
    row.steer = terms.steer;
    row.left = terms.left;
    row.right = terms.right;
    rows.push_back(row);
  }
  return rows;
}

std::string csv_of(const std::vector<SignalRow>& rows) {
  std::string text = "t_s,error,p,i,d,steer,left,right\n";
  for (const SignalRow& row : rows) {
    for (const double value : {row.t, row.error, row.p, row.i, row.d, row.steer, row.left})
      text += number_text(value) + ',';
    text += number_text(row.right) + '\n';
  }
  return text;
}

}  // namespace lw
