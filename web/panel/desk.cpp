#include "web/panel/desk.h"

#include <algorithm>
#include <utility>

#include "engine/scenario/same.h"

namespace lw::panel {
namespace {

constexpr double notice_seconds = 4.0;

void remember(History& history, Scenario before) {
  history.past.push_back(std::move(before));
  if (history.past.size() > most_steps) history.past.erase(history.past.begin());
  history.future.clear();
}

/// Moves one step from one end of the history to the other.
void step(Desk& desk, std::vector<Scenario>& from, std::vector<Scenario>& to) {
  end_edit(desk);
  if (from.empty()) return;
  to.push_back(std::move(desk.scenario));
  desk.scenario = std::move(from.back());
  from.pop_back();
  desk.selection = {};
  desk.touched = true;
}

}  // namespace

void begin_edit(Desk& desk) {
  if (!desk.history.open) desk.history.open = desk.scenario;
}

void touch(Desk& desk) { desk.touched = true; }

void end_edit(Desk& desk) {
  if (!desk.history.open) return;
  Scenario before = std::move(*desk.history.open);
  desk.history.open.reset();
  if (!same(before, desk.scenario)) remember(desk.history, std::move(before));
}

void cancel_edit(Desk& desk) {
  if (!desk.history.open) return;
  desk.scenario = std::move(*desk.history.open);
  desk.history.open.reset();
  desk.touched = true;
}

void replace(Desk& desk, Scenario scenario) {
  edit(desk, [&](Scenario& s) { s = std::move(scenario); });
  desk.selection = {};
  desk.playback.playing = false;
  desk.playback.cursor = 0.0;
}

bool can_undo(const Desk& desk) { return !desk.history.past.empty(); }
bool can_redo(const Desk& desk) { return !desk.history.future.empty(); }
void undo(Desk& desk) { step(desk, desk.history.past, desk.history.future); }
void redo(Desk& desk) { step(desk, desk.history.future, desk.history.past); }

void redrive(Desk& desk) {
  if (!desk.touched) return;
  desk.touched = false;
  const std::uint64_t key = ground_key(desk.scenario);
  const bool same_ground = has_drive(desk) && key == desk.good.ground;
  Result<Plan> plan = make_plan(desk.scenario, same_ground ? desk.good.plan.ground : nullptr);
  if (!plan.ok()) {
    desk.error = plan.error();
    return;
  }
  GoodDrive& good = desk.good;
  good.scenario = desk.scenario;
  good.ground = key;
  good.plan = std::move(*plan);
  good.summary = drive(good.plan, &good.trace);
  good.headline = reason(good.plan, good.summary, good.trace);
  good.hash = trace_hash(good.trace);
  ++good.revision;
  desk.error.reset();
  set_cursor(desk, desk.playback.cursor);
}

bool has_drive(const Desk& desk) { return desk.good.revision > 0 && !desk.good.trace.rows.empty(); }

std::size_t row_at(const Trace& trace, double t) {
  const auto after = std::upper_bound(trace.rows.begin(), trace.rows.end(), t,
                                      [](double time, const TraceRow& row) { return time < row.t; });
  return after == trace.rows.begin() ? 0 : static_cast<std::size_t>(after - trace.rows.begin()) - 1;
}

TraceRow between_rows(const Trace& trace, double t) {
  if (trace.rows.empty()) return {};
  const std::size_t at = row_at(trace, t);
  TraceRow row = trace.rows[at];
  if (at + 1 >= trace.rows.size()) return row;
  const TraceRow& next = trace.rows[at + 1];
  const double span = next.t - row.t;
  const double part = span > 0 ? std::clamp((t - row.t) / span, 0.0, 1.0) : 0.0;
  // Pose and motion go on between two loops; what the controller holds does not.
  for (double TraceRow::*member : {&TraceRow::x, &TraceRow::y, &TraceRow::heading, &TraceRow::progress,
                                   &TraceRow::deviation, &TraceRow::speed, &TraceRow::yaw_rate}) {
    row.*member += part * (next.*member - row.*member);
  }
  row.t = t;
  return row;
}

void set_cursor(Desk& desk, double t) {
  const double end = desk.good.trace.rows.empty() ? 0.0 : desk.good.trace.rows.back().t;
  desk.playback.cursor = std::clamp(t, 0.0, end);
}

void play_on(Desk& desk, double elapsed) {
  Playback& playback = desk.playback;
  if (!playback.playing || !has_drive(desk)) return;
  set_cursor(desk, playback.cursor + elapsed * playback.rate);
  if (playback.cursor >= desk.good.trace.rows.back().t) playback.playing = false;
  desk.animate = desk.animate || playback.playing;
}

void keep(Desk& desk) {
  if (!has_drive(desk)) return;
  const GoodDrive& good = desk.good;
  desk.kept = Kept{good.scenario, good.trace, good.summary, good.headline, good.revision};
  desk.show_kept = true;
}

void drop_kept(Desk& desk) { desk.kept.reset(); }

void say(Desk& desk, std::string text) { desk.notice = {std::move(text), false, desk.now + notice_seconds}; }
void complain(Desk& desk, std::string text) { desk.notice = {std::move(text), true, 0.0}; }

}  // namespace lw::panel
