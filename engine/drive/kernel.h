// The closed loop, one period at a time.
//
//   follow   where is the guide point along the course, and is the drive over
//   sense    read the sensors at the pose of t_k
//   control  compute the commands
//   tally    keep the statistics; here a trace is taken
//   advance  let wheels and pose move on to t_(k+1), the command acting from t_k + delay
//
// Each phase is one function over a lane type, so that one drive and a batch of drives are the same code. A
// batch calls every phase over several packs of lanes before the next phase, which keeps independent work in
// flight.
#pragma once

#include <cmath>
#include <vector>

#include "engine/drive/progress.h"
#include "engine/drive/rig.h"

namespace lw {

/// Sums over the loop periods of a drive.
template <class L>
struct Totals {
  L deviation, deviation_squared, error;
  L deviation_max, deviation_max_at;
  L saturated, reversals;  // counts
  L last_sign;             // of steer, -1, 0 or 1
  L slid;                  // count of periods
};

/// How a drive stands: 0 while it runs, then 1 + the number of its Outcome.
template <class L>
struct State {
  Moment<L> moment;
  L until_next;  // s, the period now running
  Motion<L> motion;
  SineCosine<L> facing;  // of the heading at the reading
  Track<L> track;
  SensorState<L> sensors;
  LawState<L> law;
  L error;
  Terms<L> terms;
  WheelTarget<L> target;  // of the command now acting
  Totals<L> totals;
  L verdict;
  Bits<L> next_command;  // number of the first command that has not acted yet
};

/// Commands on their way to the motors, by number of their loop period modulo the queue's length.
template <class L>
struct CommandQueue {
  struct Entry {
    L acts_at;  // s
    WheelTarget<L> target;
  };
  std::vector<Entry> entries;
};

/// What stays the same over the whole run.
template <class L>
struct Setup {
  Rig<L> rig;
  Wiring wiring;
  LineView line;
  FloorView floor;
  Interval<L> interval;  // of the nominal period
};

inline constexpr double running = 0.0;
constexpr double verdict_of(Outcome outcome) { return 1.0 + static_cast<double>(outcome); }

template <class L>
inline State<L> start(const Setup<L>& setup, Bits<L> drive) {
  State<L> state{};
  const Task<L>& task = setup.rig.task;
  state.motion.x = task.start_x;
  state.motion.y = task.start_y;
  state.motion.heading = task.start_heading;
  state.track.place = task.start_progress;
  state.moment.elapsed = setup.rig.timing.period;
  state.moment.first = state.moment.t <= 0.0;
  state.moment.drive = drive;
  return state;
}

template <class L>
inline void follow_phase(const Setup<L>& setup, State<L>& state) {
  state.facing = sine_cosine(state.motion.heading);
  const L forward = setup.rig.optics.forward;
  follow(setup.line, state.motion.x + forward * state.facing.cosine,
         state.motion.y + forward * state.facing.sine, state.track);

  const Task<L>& task = setup.rig.task;
  const L progress = state.track.laps_done + state.track.place;
  L verdict = all_lanes<L>(running);
  verdict =
      select(state.moment.t >= task.time_limit - 1e-9, all_lanes<L>(verdict_of(Outcome::time_out)), verdict);
  verdict = select(progress >= task.finish, all_lanes<L>(verdict_of(Outcome::finished)), verdict);
  verdict = select(magnitude(state.track.deviation) > task.lost, all_lanes<L>(verdict_of(Outcome::line_lost)),
                   verdict);
  state.verdict = verdict;
}

template <class L>
inline void sense_phase(const Setup<L>& setup, State<L>& state) {
  sense(setup.rig.optics, setup.wiring.sensors, setup.floor, setup.wiring.seed, state.moment, state.motion,
        state.facing, state.sensors);
  state.error = error_from(setup.rig.optics, setup.wiring.sensors, state.sensors);
}

template <class L>
inline void control_phase(const Setup<L>& setup, State<L>& state) {
  state.terms = control(setup.rig.law, setup.wiring.law, state.error, state.moment.elapsed,
                        state.moment.first, state.law);
}

template <class L>
inline void tally_phase(State<L>& state) {
  Totals<L>& totals = state.totals;
  const L zero = all_lanes<L>(0.0), one = all_lanes<L>(1.0);
  const L deviation = state.track.deviation, size = magnitude(deviation);
  totals.deviation = totals.deviation + deviation;
  totals.deviation_squared = totals.deviation_squared + deviation * deviation;
  totals.error = totals.error + state.error;
  const Mask<L> worse = size > totals.deviation_max;
  totals.deviation_max = select(worse, size, totals.deviation_max);
  totals.deviation_max_at = select(worse, state.track.laps_done + state.track.place, totals.deviation_max_at);
  totals.saturated = totals.saturated + select(state.terms.saturated, one, zero);
  const L sign = select(state.terms.steer > 0.0, one, select(state.terms.steer < 0.0, -one, zero));
  totals.reversals = totals.reversals + select(sign * totals.last_sign < 0.0, one, zero);
  totals.last_sign = select(sign * sign > 0.0, sign, totals.last_sign);
}

/// Moves through one period in the pieces that waiting commands cut it into.
template <class L>
inline Mask<L> advance_delayed(const Setup<L>& setup, State<L>& state, CommandQueue<L>& queue) {
  using Entry = typename CommandQueue<L>::Entry;
  const std::uint64_t slot_mask = queue.entries.size() - 1;
  const L now_plus_delay = state.moment.t + setup.rig.timing.delay;
  const WheelTarget<L> fresh = wheel_target(setup.rig.train, state.terms.left, state.terms.right);
  for (int i = 0; i < lane_count<L>; ++i) {
    Entry& entry = queue.entries[lane(state.moment.step, i) & slot_mask];
    set_lane(entry.acts_at, i, lane(now_plus_delay, i));
    set_lane(entry.target.common, i, lane(fresh.common, i));
    set_lane(entry.target.difference, i, lane(fresh.difference, i));
  }

  L now = all_lanes<L>(0.0);  // s since the reading
  Mask<L> slid = now > 0.0;
  while (any(now < state.until_next)) {
    L acts_at = all_lanes<L>(HUGE_VAL);
    WheelTarget<L> next = state.target;
    for (int i = 0; i < lane_count<L>; ++i) {
      const std::uint64_t number = lane(state.next_command, i);
      if (number > lane(state.moment.step, i)) continue;
      const Entry& entry = queue.entries[number & slot_mask];
      set_lane(acts_at, i, lane(entry.acts_at, i));
      set_lane(next.common, i, lane(entry.target.common, i));
      set_lane(next.difference, i, lane(entry.target.difference, i));
    }
    const L until = acts_at - state.moment.t;
    const L to = held(until, now, state.until_next);
    const L duration = to - now;
    const Mask<L> moving = duration > 0.0;
    if (any(moving)) {
      Motion<L> moved = state.motion;
      slid = slid | (advance(setup.rig.train, make_interval(setup.rig.train, duration), state.target, moved) &
                     moving);
      state.motion.x = select(moving, moved.x, state.motion.x);
      state.motion.y = select(moving, moved.y, state.motion.y);
      state.motion.heading = select(moving, moved.heading, state.motion.heading);
      state.motion.common = select(moving, moved.common, state.motion.common);
      state.motion.difference = select(moving, moved.difference, state.motion.difference);
    }
    const Mask<L> acts = until < state.until_next;
    state.target.common = select(acts, next.common, state.target.common);
    state.target.difference = select(acts, next.difference, state.target.difference);
    for (int i = 0; i < lane_count<L>; ++i) {
      set_lane(state.next_command, i, lane(state.next_command, i) + (lane(acts, i) ? 1u : 0u));
    }
    now = to;
  }
  return slid;
}

template <class L>
inline void advance_phase(const Setup<L>& setup, State<L>& state, CommandQueue<L>& queue) {
  const Timing<L>& timing = setup.rig.timing;
  state.until_next = timing.period;
  if (setup.wiring.jitter) {
    const Words<L> words = draw<L>(setup.wiring.seed, state.moment.drive, state.moment.step,
                                   static_cast<std::uint32_t>(Purpose::jitter));
    state.until_next = timing.period * (1.0 + timing.jitter * (2.0 * unit_from<L>(words.word[0]) - 1.0));
  }
  Mask<L> slid;
  if (setup.wiring.delay) {
    slid = advance_delayed(setup, state, queue);
  } else {
    state.target = wheel_target(setup.rig.train, state.terms.left, state.terms.right);
    slid = setup.wiring.jitter ? advance(setup.rig.train, make_interval(setup.rig.train, state.until_next),
                                         state.target, state.motion)
                               : advance(setup.rig.train, setup.interval, state.target, state.motion);
  }
  state.totals.slid = state.totals.slid + select(slid, all_lanes<L>(1.0), all_lanes<L>(0.0));
  state.moment.t = state.moment.t + state.until_next;
  state.moment.elapsed = state.until_next;
  state.moment.step = state.moment.step + all_bits<L>(1);
  state.moment.first = state.moment.t <= 0.0;
}

}  // namespace lw
