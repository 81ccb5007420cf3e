// Runs the tests, after one line that says which build is being tested.
#define CATCH_CONFIG_RUNNER
#include <cstdio>
#include <cstring>

#include "build_info.h"
#include "tests/catch.h"

int main(int argc, char** argv) {
  bool listing = false;  // CTest asks for the list of tests and reads it line by line
  for (int i = 1; i < argc; ++i) listing = listing || std::strncmp(argv[i], "--list", 6) == 0;
  if (!listing) std::fprintf(stderr, "%s\n", lw::build_info);
  return Catch::Session().run(argc, argv);
}
