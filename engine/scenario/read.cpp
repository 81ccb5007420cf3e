// The reading half of text.h, on toml++ without exceptions. The only file that knows toml++.
#include <algorithm>
#include <limits>

#include "engine/scenario/fields.h"
#include "engine/scenario/keys.h"
#include "engine/scenario/numbers.h"
#include "engine/scenario/text.h"
#include "engine/scenario/validate.h"
#include "engine/scenario/value_text.h"

// toml++ 3.3 asserts what it then checks properly: "[" at the end of a line breaks such an assertion, and without
// assertions the compiler is told to rely on it. Neither may happen on bad input, so both are switched off.
#undef NDEBUG
#define TOML_ASSERT(expression) static_assert(true)
#define TOML_ENABLE_FORMATTERS 0
#define TOML_MAX_NESTED_VALUES 16  // a scenario nests three deep
#include <toml++/toml.h>

namespace lw {
namespace {

// ---- text that must not reach the parser
// --------------------------------------------------------------------

constexpr int most_key_parts = 8;  // of a dotted key; "stress.spread" has two

// The position after the string that begins at `at`, where the parser will also see its end.
std::size_t after_string(std::string_view text, std::size_t at) {
  const char quote = text[at];
  const std::string three(3, quote);
  const bool lines = text.substr(at, 3) == three;
  at += lines ? 3 : 1;
  while (at < text.size()) {
    if (text[at] == '\\' && quote == '"') {
      at += 2;
    } else if (lines ? text.substr(at, 3) == three : text[at] == quote || text[at] == '\n') {
      at += lines ? 3 : 1;
      // Up to two more quotes before the closing three belong to the text.
      for (int more = 0; lines && more < 2 && text.substr(at, 1) == three.substr(0, 1); ++more) ++at;
      return at;
    } else {
      ++at;
    }
  }
  return text.size();
}

// toml++ 3.3 makes one table inside the other for every part of a dotted key and takes them down recursively:
// a key of a hundred thousand dots would overflow the stack. Returns the line of such a key, or 0.
int line_of_endless_key(std::string_view text) {
  int line = 1;
  int dots = 0;
  for (std::size_t at = 0; at < text.size();) {
    const char c = text[at];
    if (c == '"' || c == '\'') {
      const std::size_t end = after_string(text, at);
      line += static_cast<int>(std::count(text.begin() + static_cast<std::ptrdiff_t>(at),
                                          text.begin() + static_cast<std::ptrdiff_t>(end), '\n'));
      at = end;
      continue;
    }
    if (c == '#') {
      at = std::min(text.find('\n', at), text.size());
      continue;
    }
    if (c == '.' && ++dots >= most_key_parts) return line;
    if (std::string_view("=,{}[]\n").find(c) != std::string_view::npos) dots = 0;
    if (c == '\n') ++line;
    ++at;
  }
  return 0;
}

// ---- where things are
// -----------------------------------------------------------------------------------------

int line_of(const toml::node& node) { return static_cast<int>(node.source().begin.line); }
int line_of(const toml::key& key) { return static_cast<int>(key.source().begin.line); }

std::string place(std::string_view name, int line) {
  std::string where(name);
  if (line <= 0) return where;
  return where.empty() ? "line " + std::to_string(line) : where + ':' + std::to_string(line);
}

// What a value is, in a message.
std::string shown(const toml::node& node) {
  if (const auto* text = node.as_string()) return in_quotes(clipped(text->get()));
  if (const auto* whole = node.as_integer()) return std::to_string(whole->get());
  if (const auto* number = node.as_floating_point()) return float_text(number->get());
  if (const auto* truth = node.as_boolean()) return truth->get() ? "true" : "false";
  if (const auto* array = node.as_array())
    return array->empty() ? "[]" : "a list of " + std::to_string(array->size());
  return node.is_table() ? "a table" : "a date or time";
}

// ---- one value of each type
// -------------------------------------------------------------------------------------

// A rule broken while a value is read: what of the value (".turn_deg", "[2]"), and how it stands there.
struct Misread {
  int line = 0;
  std::string part;
  std::string value;
  std::string rule;
};
using MaybeMisread = std::optional<Misread>;

MaybeMisread wanted(const toml::node& node, std::string rule) {
  return Misread{line_of(node), "", shown(node), std::move(rule)};
}

MaybeMisread take(const toml::node& node, double& value) {
  if (const auto* number = node.as_floating_point()) {
    value = number->get();
    return {};
  }
  if (const auto* whole = node.as_integer()) {
    value = static_cast<double>(whole->get());
    return {};
  }
  return wanted(node, "a number is wanted");
}

MaybeMisread take(const toml::node& node, std::int64_t& value) {
  const auto* whole = node.as_integer();
  if (!whole) return wanted(node, "a whole number is wanted");
  value = whole->get();
  return {};
}

MaybeMisread take(const toml::node& node, int& value) {
  std::int64_t wide = 0;
  if (auto misread = take(node, wide)) return misread;
  value = static_cast<int>(wide);
  if (value != wide) return wanted(node, "a smaller whole number is wanted");
  return {};
}

MaybeMisread take(const toml::node& node, bool& value) {
  const auto* truth = node.as_boolean();
  if (!truth) return wanted(node, "true or false is wanted");
  value = truth->get();
  return {};
}

MaybeMisread take(const toml::node& node, std::string& value) {
  const auto* text = node.as_string();
  if (!text) return wanted(node, "text in quotes is wanted");
  value = text->get();
  return {};
}

template <NamedEnum E>
MaybeMisread take(const toml::node& node, E& value) {
  const auto names = names_of(value);
  const auto* text = node.as_string();
  for (std::size_t i = 0; text && i < names.size(); ++i) {
    if (text->get() != names[i]) continue;
    value = static_cast<E>(i);
    return {};
  }
  std::string rule;
  for (std::size_t i = 0; i < names.size(); ++i) {
    if (i > 0) rule += i + 1 == names.size() ? " or " : ", ";
    rule += in_quotes(names[i]);
  }
  return wanted(node, rule + " is wanted");
}

template <class T>
MaybeMisread take(const toml::node& node, std::optional<T>& value) {
  return take(node, value.emplace());
}

MaybeMisread take_two(const toml::node& node, double& first, double& second, std::string_view form) {
  const auto* array = node.as_array();
  if (!array || array->size() != 2) return wanted(node, std::string(form) + " is wanted");
  for (std::size_t i = 0; i < 2; ++i) {
    auto misread = take((*array)[i], i == 0 ? first : second);
    if (!misread) continue;
    misread->part = '[' + std::to_string(i) + ']' + misread->part;
    return misread;
  }
  return {};
}
MaybeMisread take(const toml::node& node, Point& point) {
  return take_two(node, point.x_mm, point.y_mm, "[x, y]");
}
MaybeMisread take(const toml::node& node, Stretch& gap) {
  return take_two(node, gap.from_mm, gap.to_mm, "[from, to]");
}

MaybeMisread take(const toml::node& node, Piece& piece) {
  const std::string form = "{ straight_mm = ... } or { radius_mm = ..., turn_deg = ... }";
  const auto* table = node.as_table();
  if (!table) return wanted(node, form + " is wanted");
  std::size_t known = 0;
  MaybeMisread found;
  each_piece_field(piece, [&](const FieldInfo& info, auto& value) {
    const toml::node* inner = table->get(info.key);
    if (!inner) return;
    ++known;
    if (found) return;
    found = take(*inner, value);
    if (found) found->part = '.' + std::string(info.key) + found->part;
  });
  if (found || known == table->size()) return found;
  for (const auto& entry : *table) {
    const toml::key& key = entry.first;
    bool is_known = false;
    each_piece_field(piece, [&](const FieldInfo& info, auto&) { is_known |= info.key == key.str(); });
    if (!is_known)
      return Misread{line_of(key), '.' + clipped(key.str()), "", "unknown key; a piece is " + form};
  }
  return found;
}

template <class T>
MaybeMisread take(const toml::node& node, std::vector<T>& values) {
  const auto* array = node.as_array();
  if (!array) return wanted(node, "a list in [ ] is wanted");
  values.clear();
  for (std::size_t i = 0; i < array->size(); ++i) {
    T value{};
    if (auto misread = take((*array)[i], value)) {
      misread->part = '[' + std::to_string(i) + ']' + misread->part;
      return misread;
    }
    values.push_back(value);
  }
  return {};
}

MaybeMisread take_spread(const toml::node& node, Spread& spread) {
  const auto* table = node.as_table();
  for (std::size_t i = 0; table && table->size() == 1 && i < std::size(spread_kind_names); ++i) {
    const toml::node* amount = table->get(spread_kind_names[i]);
    if (!amount) continue;
    spread.kind = static_cast<SpreadKind>(i);
    return take(*amount, spread.amount);
  }
  return wanted(node, "{ uniform = half-width } or { normal = standard deviation } is wanted");
}

// toml++ keeps tables sorted by name; the order of the text is restored, so that writing keeps it.
MaybeMisread take(const toml::node& node, std::vector<Spread>& spreads) {
  const auto* table = node.as_table();
  if (!table) return wanted(node, "a table [stress.spread] is wanted");
  std::vector<std::pair<const toml::key*, const toml::node*>> entries;
  for (const auto& [key, value] : *table) entries.emplace_back(&key, &value);
  std::sort(entries.begin(), entries.end(), [](const auto& a, const auto& b) {
    const auto &first = a.first->source().begin, &second = b.first->source().begin;
    return first.line != second.line ? first.line < second.line : first.column < second.column;
  });
  spreads.clear();
  for (const auto& entry : entries) {
    Spread spread;
    spread.key = std::string(entry.first->str());
    if (auto misread = take_spread(*entry.second, spread)) {
      misread->part = '.' + in_quotes(clipped(spread.key)) + misread->part;
      return misread;
    }
    spreads.push_back(spread);
  }
  return {};
}

// ---- keys
// --------------------------------------------------------------------------------------------------------

struct Unknown {
  int line = std::numeric_limits<int>::max();
  std::string path;
  std::string rule;
};

void note_unknown(const toml::key& key, std::string_view section, Unknown& first) {
  if (line_of(key) >= first.line) return;
  std::string path(section);
  if (!path.empty()) path += '.';
  path += key.str();
  first = Unknown{line_of(key), clipped(path), unknown_key_rule(path)};
}

// The unknown key that comes first in the text.
Unknown first_unknown(const toml::table& root) {
  Unknown first;
  for (const auto& [key, node] : root) {
    if (!is_key("", key.str())) {
      note_unknown(key, "", first);
      continue;
    }
    const auto* section = is_section(key.str()) ? node.as_table() : nullptr;
    if (!section) continue;
    for (const auto& [inner, value] : *section)
      if (!is_key(key.str(), inner.str())) note_unknown(inner, key.str(), first);
  }
  return first;
}

// ---- the whole
// ------------------------------------------------------------------------------------------------

std::optional<Error> check_format(const toml::table& root, std::string_view name) {
  const std::string expected = in_quotes("linewright " + std::to_string(format_version));
  const toml::node* node = root.get("format");
  if (!node)
    return Error{std::string(name), "format", "missing; a scenario begins with format = " + expected};
  const auto* text = node->as_string();
  if (text && in_quotes(text->get()) == expected) return {};
  const Error error{place(name, line_of(*node)), "format = " + shown(*node), ""};
  constexpr std::string_view mark = "linewright ";
  const std::string_view rest =
      text && text->get().rfind(mark, 0) == 0 ? std::string_view(text->get()).substr(mark.size()) : "";
  const bool number =
      !rest.empty() && rest[0] != '0' && rest.find_first_not_of("0123456789") == std::string_view::npos;
  return Error{error.where, error.what,
               number ? "made for a newer linewright; this one reads " + expected
                      : "not a scenario of linewright; this one reads " + expected};
}

// toml++'s own words, without its preamble, with nothing in them that a terminal would obey.
Error syntax_error(const toml::parse_error& error, std::string_view name) {
  std::string_view text = error.description();
  const std::string where = place(name, static_cast<int>(error.source().begin.line));
  const std::size_t twice = text.find("cannot redefine existing ");
  const std::size_t open = text.find('\'', twice == std::string_view::npos ? 0 : twice);
  const std::size_t close = text.rfind('\'');
  if (twice != std::string_view::npos && open < close)
    return Error{where, clipped(text.substr(open + 1, close - open - 1)), "given twice"};
  const std::size_t colon = text.find(": ");
  if (text.rfind("Error while parsing ", 0) == 0 && colon != std::string_view::npos)
    text = text.substr(colon + 2);
  return Error{where, "", "not valid TOML: " + clipped(text, 200)};
}

Result<toml::table> parse(std::string_view text, std::string_view name) {
  if (text.size() > most_text_bytes)
    return Error{std::string(name), std::to_string(text.size()) + " bytes",
                 "a scenario has at most " + std::to_string(most_text_bytes)};
  if (!is_utf8(text)) return Error{std::string(name), "", "not text in UTF-8"};
  if (const int line = line_of_endless_key(text))
    return Error{place(name, line), "", "a key of more than " + std::to_string(most_key_parts) + " parts"};
  toml::parse_result parsed = toml::parse(text);
  if (!parsed) return syntax_error(parsed.error(), name);
  return std::move(parsed).table();
}

// Puts what the text gives into the scenario; the other fields stay.
std::optional<Error> merge(const toml::table& root, std::string_view name, Scenario& scenario) {
  const Unknown unknown = first_unknown(root);
  if (!unknown.path.empty()) return Error{place(name, unknown.line), unknown.path, unknown.rule};
  std::optional<Error> found;
  each_field(scenario, [&](const FieldInfo& info, auto& value) {
    if (found) return;
    const toml::node* node = info.section.empty() ? &root : root.get(info.section);
    if (!node) return;
    if (!node->is_table()) {
      const std::string section(info.section);
      found = Error{place(name, line_of(*node)), section + " = " + shown(*node),
                    "a section is wanted: [" + section + "] once, on a line of its own"};
      return;
    }
    node = node->as_table()->get(info.key);
    if (!node) return;
    const auto misread = take(*node, value);
    if (!misread) return;
    std::string what = path_of(info) + misread->part;
    if (!misread->value.empty()) what += " = " + misread->value;
    found = Error{place(name, misread->line), what, misread->rule};
  });
  return found;
}

// The line of what a fault is about; of its section when it is about a default; 0 when neither is there.
int line_of(const Fault& fault, const toml::table& root, const Scenario& scenario) {
  const toml::node* section = fault.section.empty() ? &root : root.get(fault.section);
  if (!section || !section->is_table()) return 0;
  const toml::node* node = section->as_table()->get(fault.key);
  if (!node) return fault.section.empty() ? 0 : line_of(*section);
  if (fault.entry < 0) return line_of(*node);
  const auto entry = static_cast<std::size_t>(fault.entry);
  const toml::node* inner = nullptr;
  if (const auto* array = node->as_array()) inner = array->get(entry);
  if (const auto* table = node->as_table()) inner = table->get(scenario.stress.spread[entry].key);
  return line_of(inner ? *inner : *node);
}

}  // namespace

Result<Scenario> read(std::string_view text, std::string_view name) {
  const auto root = parse(text, name);
  if (!root) return root.error();
  if (const auto error = check_format(*root, name)) return *error;
  Scenario scenario;
  if (const auto error = merge(*root, name, scenario)) return *error;
  if (!root->contains("course"))
    return Error{std::string(name), "[course]", "missing; a scenario needs a course of pieces or points_mm"};
  if (const auto fault = find_fault(scenario))
    return error_of(*fault, place(name, line_of(*fault, *root, scenario)));
  return scenario;
}

namespace {

// "[section]" and "key = value", the one assignment of --set as a text of its own.
Result<toml::table> parse_assignment(std::string_view section, std::string_view key, std::string_view value,
                                     const std::string& assignment) {
  if (value.find_first_of("\r\n") != std::string_view::npos)
    return Error{"", assignment, "one value on one line is wanted"};
  std::string text = section.empty() ? "" : '[' + std::string(section) + "]\n";
  text += std::string(key) + " = " + std::string(value);
  auto root = parse(text, "");
  if (!root) return Error{"", assignment, root.error().why};
  return root;
}

// One entry of a list of numbers: "sensors.gain[1]".
Result<Scenario> set_entry(Scenario changed, std::string_view path, std::string_view value,
                           const std::string& assignment) {
  double* number = find_number(changed, path);
  if (!number) return Error{"", clipped(path), unknown_key_rule(path.substr(0, path.find('[')))};
  const auto root = parse_assignment("", "entry", value, assignment);
  if (!root) return root.error();
  if (auto misread = take(*root->get("entry"), *number)) return Error{"", assignment, misread->rule};
  if (const auto fault = find_fault_in(changed, path.substr(0, path.find('[')))) return error_of(*fault);
  return changed;
}

}  // namespace

Result<Scenario> set_key(const Scenario& scenario, std::string_view path, std::string_view value) {
  const std::string assignment = std::string(clipped(path)) + " = " + clipped(value);
  if (!path.empty() && path.back() == ']') return set_entry(scenario, path, value, assignment);
  std::optional<FieldInfo> field;
  bool word = false;  // text that may go without quotes
  each_field(scenario, [&](const FieldInfo& info, const auto& old) {
    using T = std::decay_t<decltype(old)>;
    if (path_of(info) != path) return;
    field = info;
    word = std::is_same_v<T, std::string> || NamedEnum<T> || std::is_same_v<T, std::optional<Outcome>>;
  });
  if (!field) return Error{"", clipped(path), unknown_key_rule(path)};
  const bool bare = word && value.substr(0, 1) != "\"" && value.substr(0, 1) != "'";
  const std::string written = bare ? in_quotes(value) : std::string(value);
  const auto root = parse_assignment(field->section, field->key, written, assignment);
  if (!root) return root.error();
  Scenario changed = scenario;
  if (auto error = merge(*root, "", changed)) return Error{"", error->what, error->why};
  if (const auto fault = find_fault_in(changed, path)) return error_of(*fault);
  return changed;
}

}  // namespace lw
