#include "engine/drive/drive.h"

#include <cmath>

#include "engine/drive/kernel.h"

namespace lw {

namespace {

Setup<double> setup_of(const Plan& plan) {
  return {plan.rig, plan.wiring, view_of(plan.ground->line), view_of(plan.ground->floor),
          make_interval(plan.rig.train, plan.rig.timing.period)};
}

void record(const Setup<double>& setup, const State<double>& state, Trace& trace) {
  const Drivetrain<double>& train = setup.rig.train;
  const Motion<double>& motion = state.motion;
  trace.rows.push_back(
      {state.moment.t, motion.x, motion.y, motion.heading, state.track.laps_done + state.track.place,
       state.track.deviation, axle_speed(train, motion.common, motion.difference),
       axle_yaw(train, motion.common, motion.difference), state.error, state.terms.p, state.terms.i,
       state.terms.d, state.terms.steer, state.terms.left, state.terms.right});
  const double* reading = state.sensors.reading;
  trace.readings.insert(trace.readings.end(), reading, reading + trace.sensors);
}

Summary summary_of(const State<double>& state, double start_progress) {
  const Totals<double>& totals = state.totals;
  const double steps = static_cast<double>(state.moment.step + 1);
  Summary summary;
  summary.outcome = static_cast<Outcome>(static_cast<int>(state.verdict - 1.0));
  summary.time = state.moment.t;
  summary.progress = state.track.laps_done + state.track.place;
  summary.mean_speed = summary.time > 0.0 ? (summary.progress - start_progress) / summary.time : 0.0;
  summary.deviation_mean = totals.deviation / steps;
  summary.deviation_rms = square_root(totals.deviation_squared / steps);
  summary.deviation_max = totals.deviation_max;
  summary.deviation_max_at = totals.deviation_max_at;
  summary.error_mean = totals.error / steps;
  summary.saturated = totals.saturated / steps;
  summary.reversals_per_s = summary.time > 0.0 ? totals.reversals / summary.time : 0.0;
  summary.slid = totals.slid > 0.0;
  summary.steps = static_cast<std::int64_t>(state.moment.step) + 1;
  return summary;
}

}  // namespace

Summary drive(const Plan& plan, Trace* trace, std::uint64_t number) {
  const Setup<double> setup = setup_of(plan);
  CommandQueue<double> queue;
  if (setup.wiring.delay) queue.entries.resize(static_cast<std::size_t>(setup.wiring.queue_length));
  if (trace) {  // keeps the memory of an earlier trace: a screen drives again for every change
    trace->sensors = setup.wiring.sensors.count;
    trace->rows.clear();
    trace->readings.clear();
  }

  State<double> state = start(setup, number);
  for (double start_progress = NAN;;) {
    follow_phase(setup, state);
    if (std::isnan(start_progress)) start_progress = state.track.laps_done + state.track.place;
    sense_phase(setup, state);
    control_phase(setup, state);
    tally_phase(state);
    if (trace) record(setup, state, *trace);
    if (state.verdict != running) return summary_of(state, start_progress);
    advance_phase(setup, state, queue);
  }
}

}  // namespace lw
