#include "shell/answer.h"

#include <cerrno>
#include <cstdio>
#include <cstring>

#include "shell/line.h"

namespace lw::shell {

Answer refused(Error error) {
  Answer answer;
  answer.errors.push_back(std::move(error));
  return answer;
}

void complain(std::string_view message) {
  std::fprintf(stderr, "linewright: %.*s\n", static_cast<int>(message.size()), message.data());
}

bool put(std::string_view text) {
  const bool written = std::fwrite(text.data(), 1, text.size(), stdout) == text.size();
  if (written && std::fflush(stdout) == 0) return true;
  complain("cannot write to stdout: " + std::string(std::strerror(errno)));
  return false;
}

int print(const Answer& answer, bool json) {
  for (const Error& error : answer.errors) complain(text_of(error));
  if (!answer.errors.empty()) return wrong_input;
  for (const std::string& note : answer.notes) complain(note);
  // A file name need not be UTF-8, JSON has to be.
  const bool written =
      put(json ? answer.json.dump(2, ' ', false, Json::error_handler_t::replace) + '\n' : answer.text);
  return written ? answer.exit : wrong_input;
}

Result<bool> write_file(const std::string& path, std::string_view text) {
  const auto failed = [&] {
    return Error{path, "", "cannot be written: " + std::string(std::strerror(errno))};
  };
  std::FILE* file = std::fopen(path.c_str(), "wb");
  if (!file) return failed();
  const bool written = std::fwrite(text.data(), 1, text.size(), file) == text.size();
  if (std::fclose(file) != 0 || !written) return failed();
  return true;
}

}  // namespace lw::shell
