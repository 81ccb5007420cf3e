#include "shell/line.h"

int main(int argc, char** argv) { return lw::shell::run(argc, argv); }
