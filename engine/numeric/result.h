// Errors as values. Whatever can fail returns a Result; nothing in the engine throws.
//
// An Error names where the trouble is (a file and line, a key, a place on the course), what is there, and why
// that cannot be used: the three things a reader needs to mend it.
#pragma once

#include <string>
#include <utility>
#include <variant>

namespace lw {

struct Error {
  std::string where;  // file:line, key, or place; may be empty for input without a name
  std::string what;   // the offending key, value or thing as the user wrote it
  std::string why;    // the rule it breaks
};

/// The one-line form of an error, "where: what: why", leaving out empty parts.
inline std::string text_of(const Error& error) {
  std::string line = error.where;
  for (const std::string* part : {&error.what, &error.why}) {
    if (part->empty()) continue;
    if (!line.empty()) line += ": ";
    line += *part;
  }
  return line;
}

/// A value, or the reason why there is none. Test with ok() before reading either.
template <class T>
class Result {
 public:
  Result(T value) : held_(std::move(value)) {}
  Result(Error error) : held_(std::move(error)) {}

  bool ok() const { return std::holds_alternative<T>(held_); }
  explicit operator bool() const { return ok(); }

  T& operator*() { return std::get<T>(held_); }
  const T& operator*() const { return std::get<T>(held_); }
  T* operator->() { return &std::get<T>(held_); }
  const T* operator->() const { return &std::get<T>(held_); }

  const Error& error() const { return std::get<Error>(held_); }

 private:
  std::variant<T, Error> held_;
};

}  // namespace lw
