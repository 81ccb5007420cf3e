// web/host.h without a browser, for tests: what was asked is written down here, and can be read and reset.
#pragma once

#include <map>
#include <string>
#include <vector>

namespace lw::host {

struct Asked {
  struct File {
    std::string name, bytes, type;
  };
  struct Job {
    int number;
    std::string request;
  };
  std::vector<File> saved;
  std::vector<std::string> copied;
  std::vector<std::string> choices;  // what choose_file() was to accept
  std::map<std::string, std::string> kept;
  bool refuses_to_store = false;  // set it to play a browser that will not
  std::string fragment;
  double seconds = 0;  // what seconds() answers; the test moves it
  std::vector<Job> started;
  std::vector<int> cancelled;
};

/// The one record of what was asked; assign Asked{} to start anew.
Asked& asked();

}  // namespace lw::host
