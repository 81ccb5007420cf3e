#include "engine/drive/trace_text.h"

#include <iterator>

#include "engine/numeric/lanes.h"
#include "engine/scenario/value_text.h"

namespace lw {
namespace {

constexpr std::size_t named_columns = std::size(trace_columns);
constexpr std::string_view hex_digits = "0123456789abcdef";

std::size_t sensors_of(const Trace& trace) { return static_cast<std::size_t>(trace.sensors); }

std::string bits_text(double value) {
  std::uint64_t word = value == 0.0 ? 0 : bits_of(value);
  std::string text(16, '0');
  for (std::size_t at = 16; at-- > 0; word >>= 4) text[at] = hex_digits[word & 15];
  return text;
}

bool take_bits(std::string_view text, double& value) {
  if (text.size() != 16) return false;
  std::uint64_t word = 0;
  for (const char digit : text) {
    const std::size_t found = hex_digits.find(digit);
    if (found == std::string_view::npos) return false;
    word = word << 4 | found;
  }
  value = __builtin_bit_cast(double, word);
  return true;
}

/// Cuts the part before `mark`, or all, off the front of `rest`.
std::string_view cut(std::string_view& rest, char mark) {
  const std::size_t end = rest.find(mark);
  const std::string_view part = rest.substr(0, end);
  rest.remove_prefix(end == std::string_view::npos ? rest.size() : end + 1);
  return part;
}

bool take_row(std::string_view line, Trace& trace) {
  TraceRow row;
  for (const TraceColumn& column : trace_columns) {
    if (!take_bits(cut(line, ','), row.*column.member)) return false;
  }
  trace.rows.push_back(row);
  for (int i = 0; i < trace.sensors; ++i) {
    double reading = 0.0;
    if (!take_bits(cut(line, ','), reading)) return false;
    trace.readings.push_back(reading);
  }
  return line.empty();
}

}  // namespace

std::string trace_header(const Trace& trace) {
  std::string header;
  for (const TraceColumn& column : trace_columns) {
    if (!header.empty()) header += ',';
    header += column.name;
  }
  for (int i = 0; i < trace.sensors; ++i) header += ",reading_" + std::to_string(i);
  return header;
}

std::string trace_csv(const Trace& trace) {
  std::string text = trace_header(trace) + '\n';
  const double* reading = trace.readings.data();
  for (const TraceRow& row : trace.rows) {
    bool first = true;
    for (const TraceColumn& column : trace_columns) {
      if (!first) text += ',';
      first = false;
      text += number_text(column.scale * (row.*column.member));
    }
    for (int i = 0; i < trace.sensors; ++i) text += ',' + number_text(*reading++);
    text += '\n';
  }
  return text;
}

std::string trace_bits_row(const Trace& trace, std::size_t row) {
  std::string text;
  for (const TraceColumn& column : trace_columns) {
    if (!text.empty()) text += ',';
    text += bits_text(trace.rows[row].*column.member);
  }
  for (std::size_t i = 0; i < sensors_of(trace); ++i)
    text += ',' + bits_text(trace.readings[row * sensors_of(trace) + i]);
  return text;
}

std::string trace_bits(const Trace& trace) {
  std::string text = trace_header(trace) + '\n';
  for (std::size_t row = 0; row < trace.rows.size(); ++row) text += trace_bits_row(trace, row) + '\n';
  return text;
}

Result<Trace> read_trace_bits(std::string_view text, std::string_view name) {
  std::size_t columns = 1;
  const std::string_view header = cut(text, '\n');
  for (const char c : header) columns += c == ',' ? 1 : 0;
  Trace trace;
  trace.sensors = columns > named_columns ? static_cast<int>(columns - named_columns) : 0;
  if (header != trace_header(trace)) return Error{std::string(name) + ":1", "", "not the columns of a trace"};
  for (int line = 2; !text.empty(); ++line) {
    if (!take_row(cut(text, '\n'), trace))
      return Error{std::string(name) + ':' + std::to_string(line), "", "not a row of a trace's bits"};
  }
  return trace;
}

}  // namespace lw
