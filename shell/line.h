// The command line as a whole: words and options to the call of a command, its answer to stdout and exit
// code.
//
// The only room that knows CLI11 is line.cpp: a command (commands.h) is a function from a plain struct to an
// Answer. To add a command: its struct and function in commands.h, one file, one entry in line.cpp.
#pragma once

namespace lw::shell {

/// Exit codes, fixed by contract.
inline constexpr int done = 0;                // and, for check, every expectation holds
inline constexpr int expectation_failed = 1;  // of check
inline constexpr int wrong_input = 2;         // the input or the call; stderr says what and where

/// Runs one command line. Returns the exit code.
int run(int argc, const char* const* argv);

}  // namespace lw::shell
