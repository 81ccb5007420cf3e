#include "shell/line.h"

#include <CLI/CLI.hpp>
#include <functional>

#include "build_info.h"
#include "engine/scenario/keys.h"
#include "engine/scenario/value_text.h"
#include "shell/commands.h"

namespace lw::shell {
namespace {

constexpr const char* about =
    "Drives line-guided vehicles on their courses before the real ones get there: one drive, what it was\n"
    "expected to be, the whole description behind it, and links to pass it on.";
constexpr const char* closing =
    "SCENARIO is a file, a link (in quotes), or - for stdin. Exit code: 0 done, and for check every\n"
    "expectation holds; 1 an expectation failed; 2 the input or the call is wrong, and stderr says what.\n"
    "Every command has --help and --json.";
constexpr const char* default_page = "linewright.html";

/// A command with its options bound to the struct it is called with.
struct Bound {
  CLI::App* app;
  std::function<Answer()> call;
};

struct Line {
  CLI::App app{about, "linewright"};
  std::vector<Bound> commands;
  bool json = false;
  DriveCall drive;
  CheckCall check;
  DescribeCall describe;
  LinkCall link;
  LoopCall loop;
  TuneCall tune;
  CeilingCall ceiling;
  TermsCall terms;
  SignalCall signal;
};

CLI::App* add_command(Line& line, const char* name, const char* does, std::function<Answer()> call) {
  CLI::App* app = line.app.add_subcommand(name, does);
  app->add_flag("--json", line.json, "One JSON object on stdout");
  line.commands.push_back({app, std::move(call)});
  return app;
}

void add_set(CLI::App* app, std::vector<std::string>& set) {
  app->add_option("--set", set, "Override a key, such as controller.kp=0.25; may be given again")
      ->type_name("KEY=VALUE")
      ->allow_extra_args(false);
}

void add_input(CLI::App* app, Input& input) {
  app->add_option("SCENARIO", input.from, "A file, a link, or - for stdin")->type_name("")->required();
  add_set(app, input.set);
}

void add_file(CLI::App* app, const char* option, std::string& path, const char* does) {
  app->add_option(option, path, does)->type_name("FILE");
}

/// Commands that drive many times, or look at one part alone.
void add_studies(Line& line) {
  CLI::App* ceiling = add_command(line, "ceiling", "The highest base speed that gets round, and what ends it",
                                  [&line] { return ceiling_command(line.ceiling); });
  add_input(ceiling, line.ceiling.input);
  ceiling->add_option("--kind", line.ceiling.kinds, "Only these of P, PI, PD, PID, separated by commas")
      ->delimiter(',')
      ->allow_extra_args(false)
      ->type_name("KIND,...");
  ceiling->add_flag("--retune", line.ceiling.retune,
                    "Set the gains afresh at every base, from the critical gain");
  ceiling->footer("Example: linewright ceiling scenarios/hairpins.toml --kind P,PID");

  CLI::App* terms = add_command(line, "terms", "Whether I and D earn their place on this vehicle and course",
                                [&line] { return terms_command(line.terms); });
  add_input(terms, line.terms.input);
  terms->footer("Example: linewright terms scenarios/s_bends.toml");

  CLI::App* signal =
      add_command(line, "signal", "The controller alone on a test signal, to hold your code against",
                  [&line] { return signal_command(line.signal); });
  add_input(signal, line.signal.input);
  signal
      ->add_option("--segments", line.signal.segments,
                   "LEVEL@SECONDS,...: levels of the error, each reached in so long")
      ->type_name("LIST")
      ->required();
  add_file(signal, "--csv", line.signal.csv, "Write the CSV here rather than to stdout");
  signal->footer(
      "A hold repeats a level, a step takes 0 s. Example: linewright signal scenarios/oval.toml\n"
      "--segments \"0@0.1, 0.2@0, 0.2@0.5, -0.1@1\"");
}

void add_tune(Line& line) {
  CLI::App* tune = add_command(line, "tune", "Gains by experiment, rule or search, each tried",
                               [&line] { return tune_command(line.tune); });
  add_input(tune, line.tune.input);
  tune->add_option("--method", line.tune.method,
                   "rules: by theory; critical: by the swing on a straight; relay: by the relay experiment; "
                   "habit: as on the floor; search: the best within limits")
      ->type_name("METHOD")
      ->capture_default_str();
  SearchCall& search = line.tune.search;
  tune->add_option("--free", search.free, "search: what is varied, such as kp or base=30:80; again for more")
      ->type_name("NAME[=LOW:HIGH]")
      ->allow_extra_args(false);
  tune->add_option("--limit", search.limits,
                   "search: what has to hold, such as deviation_mm=3; again for more")
      ->type_name("NAME=VALUE")
      ->allow_extra_args(false);
  tune->add_option("--goal", search.goal, "search: time or deviation")
      ->type_name("GOAL")
      ->capture_default_str();
  tune->add_option("--evaluations", search.evaluations, "search: candidates tried")->capture_default_str();
  tune->add_option("--draws", search.draws, "search: drives a candidate")->capture_default_str();
  tune->add_option("--seed", search.seed, "search: seed of its draws")->capture_default_str();
  tune->footer("Example: linewright tune scenarios/oval.toml --method critical");
}

void add_commands(Line& line) {
  CLI::App* drive = add_command(line, "drive", "One drive: how it went, and why",
                                [&line] { return drive_command(line.drive); });
  add_input(drive, line.drive.input);
  add_file(drive, "--trace", line.drive.trace, "Write every loop of the drive as CSV");
  add_file(drive, "--trace-bits", line.drive.trace_bits, "Write every loop as exact bits, to compare builds");
  drive->footer(
      "Example: linewright drive scenarios/straight.toml --set controller.kp=0.2 --trace trace.csv");

  CLI::App* check = add_command(line, "check", "Drive scenarios and hold each to its [expect]",
                                [&line] { return check_command(line.check); });
  check->add_option("SCENARIO", line.check.from, "Files, links, or - for stdin")->type_name("")->required();
  add_set(check, line.check.set);
  add_file(check, "--junit", line.check.junit, "Write the report as JUnit XML too");
  check->footer("Example: linewright check scenarios/*.toml --junit report.xml");

  CLI::App* describe = add_command(line, "describe", "The whole scenario with defaults and derived figures",
                                   [&line] { return describe_command(line.describe); });
  add_input(describe, line.describe.input);
  CLI::Option* scenario = describe->get_option("SCENARIO")->required(false);
  describe->get_option("--set")->needs(scenario);
  describe->callback([&line, scenario] { line.describe.all_keys = scenario->count() == 0; });
  describe->footer("Without a scenario: every key with its default, range, unit and meaning.");

  CLI::App* link = add_command(line, "link", "A scenario file as a link, or a link as scenario text",
                               [&line] { return link_command(line.link); });
  add_input(link, line.link.input);
  line.link.page = default_page;
  link->add_option("--page", line.link.page, "Address of the page that the link opens")
      ->type_name("ADDRESS")
      ->capture_default_str();
  link->footer("Example: linewright link scenarios/straight.toml > straight.link");

  CLI::App* loop = add_command(line, "loop", "The linear loop on the straight: margins, critical gain, poles",
                               [&line] { return loop_command(line.loop); });
  add_input(loop, line.loop.input);
  loop->footer("Example: linewright loop scenarios/straight.toml --set controller.kp=0.5");

  add_tune(line);
  add_studies(line);
}

/// The candidate nearest to a wrong word, or nothing when none is near.
std::string nearest(const std::string& word, const std::vector<std::string>& candidates) {
  std::string found;
  std::size_t least = std::max<std::size_t>(2, word.size() / 2) + 1;
  for (const std::string& candidate : candidates) {
    const std::size_t edits = edits_between(candidate, word.substr(0, 80));
    if (edits >= least) continue;
    least = edits;
    found = candidate;
  }
  return found;
}

/// Words behind the command that nothing takes: misspelt options, and too many scenarios.
std::string complaint_about(const std::string& word, const CLI::App& command) {
  const bool option = word.size() > 1 && word[0] == '-';
  if (!option) return command.get_name() + " takes one scenario, and " + clipped(word) + " is one too many";
  std::vector<std::string> names;
  for (const CLI::Option* known : command.get_options()) {
    for (const std::string& name : known->get_lnames()) names.push_back("--" + name);
  }
  const std::string bare = word.substr(0, word.find('='));
  const std::string hint = nearest(bare, names);
  return "unknown option " + clipped(bare) + " of " + command.get_name() +
         (hint.empty() ? "; see linewright " + command.get_name() + " --help"
                       : "; did you mean " + hint + '?');
}

int refuse(const std::string& message) {
  complain(message);
  return wrong_input;
}

int refuse_word(const Line& line, const std::string& word) {
  std::vector<std::string> names;
  std::string list;
  for (const Bound& command : line.commands) {
    names.push_back(command.app->get_name());
    list += (list.empty() ? "" : ", ") + names.back();
  }
  names.insert(names.end(), {"--help", "--version"});
  const std::string hint = nearest(word, names);
  return refuse((word.substr(0, 1) == "-" ? "unknown option " : "unknown command ") +
                (word.empty() ? "\"\"" : clipped(word)) +
                (hint.empty() ? "; the commands are " + list : "; did you mean " + hint + '?'));
}

bool is_word(const Line& line, const std::string& word) {
  bool known = word == "--help" || word == "-h" || word == "--version";
  for (const Bound& command : line.commands) known = known || command.app->get_name() == word;
  return known;
}

const Bound* chosen(const Line& line) {
  for (const Bound& command : line.commands) {
    if (command.app->parsed()) return &command;
  }
  return nullptr;
}

int refuse_parse(Line& line, const CLI::ParseError& error) {
  const Bound* command = chosen(line);
  const auto left = line.app.remaining(true);
  if (command && !left.empty()) return refuse(complaint_about(left.front(), *command->app));
  const std::string where = command ? command->app->get_name() + ": " : "";
  return refuse(where + error.what() + "; see linewright " + (command ? command->app->get_name() + ' ' : "") +
                "--help");
}

}  // namespace

int run(int argc, const char* const* argv) {
  Line line;
  line.app.footer(closing);
  line.app.set_version_flag("--version", build_info, "How this program was built");
  add_commands(line);
  const std::string first = argc > 1 ? argv[1] : "--help";
  if (!is_word(line, first)) return refuse_word(line, first);
  if (argc < 2) {
    complain("a command is wanted\n\n" + line.app.help());
    return wrong_input;
  }
  try {
    line.app.parse(argc, argv);
  } catch (const CLI::CallForVersion&) {
    return put(std::string(build_info) + '\n') ? done : wrong_input;
  } catch (const CLI::CallForHelp&) {
    return put(line.app.help()) ? done : wrong_input;
  } catch (const CLI::ParseError& error) {
    return refuse_parse(line, error);
  }
  return print(chosen(line)->call(), line.json);
}

}  // namespace lw::shell
