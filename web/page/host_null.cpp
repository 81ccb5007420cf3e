#include "web/page/host_null.h"

#include "web/host.h"

namespace lw::host {

Asked& asked() {
  static Asked all;
  return all;
}

void save_file(std::string_view name, std::string_view bytes, std::string_view type) {
  asked().saved.push_back({std::string(name), std::string(bytes), std::string(type)});
}
void choose_file(std::string_view accept) { asked().choices.emplace_back(accept); }
void copy_text(std::string_view text) { asked().copied.emplace_back(text); }
bool store(std::string_view key, std::string_view text) {
  if (asked().refuses_to_store) return false;
  asked().kept[std::string(key)] = text;
  return true;
}
std::string stored(std::string_view key) {
  const auto at = asked().kept.find(std::string(key));
  return at == asked().kept.end() ? std::string() : at->second;
}
std::string address() { return "http://127.0.0.1/"; }
void set_fragment(std::string_view fragment) { asked().fragment = fragment; }
double seconds() { return asked().seconds; }
void start_job(int job, std::string_view request) { asked().started.push_back({job, std::string(request)}); }
void cancel_job(int job) { asked().cancelled.push_back(job); }

}  // namespace lw::host
