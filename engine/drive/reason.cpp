// The likely reason of a drive's end, read from its trace.
//
// A lost line is judged over the departure: from the last row with a deviation below a quarter of what counts
// as lost, to the end. Reasons are tried from the most to the least specific; the thresholds are shares of
// the departure and are judgement, chosen on the scenarios of this project.
#include <cmath>

#include "engine/drive/drive.h"
#include "engine/numeric/words.h"

namespace lw {

namespace {

struct Departure {
  const Plan& plan;
  const Trace& trace;
  std::size_t first = 0, end = 0;  // rows
  std::size_t blind =
      0;  // the row from which no sensor saw the line until the end; = end when one always did
};

bool sees(const Plan& plan, const Trace& trace, std::size_t row) {
  const Optics<double>& optics = plan.rig.optics;
  for (int i = 0; i < trace.sensors; ++i) {
    const double reading =
        trace.readings[row * static_cast<std::size_t>(trace.sensors) + static_cast<std::size_t>(i)];
    if (reading < optics.dark[i] + (1.0 - sees_line) * optics.contrast[i]) return true;
  }
  return false;
}

Departure departure_of(const Plan& plan, const Trace& trace) {
  Departure departure{plan, trace, 0, trace.rows.size(), trace.rows.size()};
  for (std::size_t row = departure.end; row-- > 0;) {
    if (std::fabs(trace.rows[row].deviation) < 0.25 * plan.rig.task.lost) {
      departure.first = row;
      break;
    }
  }
  while (departure.blind > departure.first && !sees(plan, trace, departure.blind - 1)) --departure.blind;
  return departure;
}

template <class Test>
double share_of(std::size_t first, std::size_t end, Test test) {
  std::size_t count = 0;
  for (std::size_t row = first; row < end; ++row) count += test(row) ? 1u : 0u;
  return end > first ? static_cast<double>(count) / static_cast<double>(end - first) : 0.0;
}

bool commands_at_limit(const Plan& plan, const TraceRow& row) {
  return std::fabs(row.steer) >= plan.rig.law.steer_limit || std::fabs(row.left) >= 1.0 ||
         std::fabs(row.right) >= 1.0;
}

/// Three half-waves of deviation in a row, of alternating sign, each at least a quarter larger than the one
/// before.
bool oscillation_grew(const Trace& trace) {
  double peak = 0.0, later_peak = HUGE_VAL;
  int grown = 0;
  for (std::size_t row = trace.rows.size(); row-- > 0;) {
    const double deviation = trace.rows[row].deviation;
    if (deviation * peak < 0.0) {  // a half-wave ends here, going back in time
      if (later_peak < 1.25 * std::fabs(peak)) return false;
      if (++grown == 4) return true;
      later_peak = std::fabs(peak);
      peak = 0.0;
    }
    if (std::fabs(deviation) > std::fabs(peak)) peak = deviation;
  }
  return false;
}

bool in_gap(const Centreline& line, double place) {
  const double past = 1e3 * place;
  for (const Stretch& gap : line.gaps_mm) {
    if (past >= gap.from_mm - 20.0 && past <= gap.to_mm + 100.0) return true;  // a gap is left by its far end
  }
  return false;
}

double place_on(const Centreline& line, double progress) {
  if (!line.closed) return progress;
  return progress - line.length * std::floor(progress / line.length);
}

std::string section_name(const Centreline& line, double place, double reach_back) {
  for (const double corner : line.corners) {
    double past = place - corner;
    if (line.closed && past < 0.0) past += line.length;
    if (past >= -0.01 && past <= reach_back) return "at the corner";
  }
  for (const CourseSection& section : line.sections) {
    if (place < section.from || place > section.to || section.radius <= 0.0) continue;
    if (!std::isfinite(section.radius)) return "on the straight";
    return formatted("in the %.0f mm bend", 1e3 * section.radius);
  }
  return "";
}

std::string loss_reason(const Plan& plan, const Departure& departure) {
  const std::vector<TraceRow>& rows = departure.trace.rows;
  const auto limited = [&](std::size_t row) { return commands_at_limit(plan, rows[row]); };
  const auto slides = [&](std::size_t row) {
    return std::fabs(rows[row].speed * rows[row].yaw_rate) > plan.rig.train.slide_limit;
  };
  if (departure.end == 1) return "it starts off the line";
  const double entry = place_on(plan.ground->line, rows[departure.first].progress);
  if (in_gap(plan.ground->line, entry)) return "the line is missing";
  if (share_of(departure.first, departure.end, slides) > 0.3) return "the tyres slid";
  if (oscillation_grew(departure.trace)) return "the oscillation grew";
  if (share_of(departure.first, departure.blind, limited) > 0.5) return "steer saturated";
  if (departure.blind < departure.end) {
    return departure.trace.sensors == 1 ? "the sensor lost sight of the line"
                                        : "the sensors lost sight of the line";
  }
  double most = 0.0;
  for (std::size_t row = departure.first; row < departure.end; ++row)
    most = std::fmax(most, std::fabs(rows[row].steer));
  return formatted("steer reached only %.0f %%", 1e2 * most);
}

std::string place_text(const Centreline& line, double progress) {
  const double place = place_on(line, progress);
  std::string text = formatted("%.2f m", place);
  if (line.closed && progress >= line.length)
    text += formatted(" of lap %.0f", std::floor(progress / line.length) + 1.0);
  return text;
}

std::string lost_text(const Plan& plan, const Trace& trace) {
  const Loss loss = loss_of(plan, trace);
  const std::string text =
      "leaves the line at " + place_text(plan.ground->line, loss.left_at) + ": " + loss.why;
  return loss.where.empty() ? text : text + " " + loss.where;
}

std::string time_out_text(const Plan& plan, const Summary& summary, const Trace& trace) {
  std::string text = formatted("not finished after %.1f s: ", summary.time);
  const double second_ago = summary.time - 1.0;
  std::size_t row = trace.rows.size() - 1;
  while (row > 0 && trace.rows[row].t > second_ago) --row;
  const double gained = summary.progress - trace.rows[row].progress;
  const std::string place = place_text(plan.ground->line, summary.progress);
  if (std::fabs(gained) < 0.005) return text + "stands still at " + place;
  if (gained < 0.0) return text + "runs backwards at " + place;
  return text + "still under way at " + place;
}

}  // namespace

Loss loss_of(const Plan& plan, const Trace& trace) {
  const Departure departure = departure_of(plan, trace);
  const Centreline& line = plan.ground->line;
  const double entry = place_on(line, trace.rows[departure.first].progress);
  return {trace.rows.back().progress, entry, loss_reason(plan, departure),
          section_name(line, entry, 1.5 * plan.rig.task.lost)};
}

std::string reason(const Plan& plan, const Summary& summary, const Trace& trace) {
  switch (summary.outcome) {
    case Outcome::line_lost:
      return lost_text(plan, trace);
    case Outcome::time_out:
      return time_out_text(plan, summary, trace);
    case Outcome::finished:
      break;
  }
  return formatted("finishes in %.2f s", summary.time) +
         formatted(", at most %.1f mm off the line", 1e3 * summary.deviation_max);
}

}  // namespace lw
