// The commands, each a function from its options to an answer.
#pragma once

#include <string>
#include <vector>

#include "shell/answer.h"
#include "shell/input.h"

namespace lw::shell {

struct DriveCall {
  Input input;
  std::string trace;       // file for the trace as CSV; empty = none
  std::string trace_bits;  // file for the trace as bits, to compare two builds; empty = none
};
/// One drive and how it went.
Answer drive_command(const DriveCall& call);

struct CheckCall {
  std::vector<std::string> from;
  std::vector<std::string> set;  // for every one of them
  std::string junit;             // file for the report as JUnit XML; empty = none
};
/// Drives every scenario and holds it to what its [expect] says.
Answer check_command(const CheckCall& call);

struct DescribeCall {
  Input input;
  bool all_keys = false;  // describes the keys themselves, with their defaults, and no scenario
};
/// The whole scenario with its defaults, gains in both units, and figures that follow from it.
Answer describe_command(const DescribeCall& call);

struct LinkCall {
  Input input;
  std::string page;  // address before '#'
};
/// A scenario file as a link, or a link as scenario text.
Answer link_command(const LinkCall& call);

struct LoopCall {
  Input input;
};
/// The linear loop on the straight: margins, critical gain, poles.
Answer loop_command(const LoopCall& call);

struct CeilingCall {
  Input input;
  std::vector<std::string> kinds;  // "P", "PI", "PD", "PID"; empty = the scenario's own choice and all four
  bool retune = false;             // gains afresh for every base, from the critical gain there
};
/// The highest base speed that gets round, and what ends it.
Answer ceiling_command(const CeilingCall& call);

struct TermsCall {
  Input input;
};
/// Whether I and D earn their place: what P alone keeps in each bend, what I removes and costs, whether D
/// pays.
Answer terms_command(const TermsCall& call);

struct SearchCall {
  Input input;
  std::vector<std::string> free;    // "kp", "base=30:80"
  std::vector<std::string> limits;  // "deviation_mm=3"
  std::string goal = "time";        // or "deviation"
  int evaluations = 600;            // candidates
  int draws = 3;                    // drives a candidate
  std::uint64_t seed = 1;           // of the search
};
/// Gains, base speed and sensor places by search, within limits.
Answer search_command(const SearchCall& call);

struct TuneCall {
  Input input;
  std::string method = "rules";  // rules | critical | relay | habit | search
  SearchCall search;             // of the method search; its input is not used
};
/// Gains by experiment and rule, each tried; or by search.
Answer tune_command(const TuneCall& call);

struct SignalCall {
  Input input;
  std::string segments;  // as read_knots() takes them
  std::string csv;       // file; empty = CSV on stdout
};
/// The controller alone on a test signal, loop by loop, to hold other code against.
Answer signal_command(const SignalCall& call);

}  // namespace lw::shell
