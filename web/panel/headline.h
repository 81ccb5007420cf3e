// The top of the page: what happened and why, in one sentence, and the figures that decisions hang on, each
// with its difference to the kept choice.
#pragma once

#include <string>
#include <vector>

#include "web/panel/grips.h"

namespace lw::panel {

/// One key figure.
struct Figure {
  const char* name;
  const char* unit;
  double value;  // in `unit`
  int decimals;
  double kept;  // the same of the kept choice, in `unit`
  int better;   // -1: smaller is better, 1: larger is better, 0: neither
};
std::vector<Figure> figures(const Summary& summary, const Summary* kept, bool closed);

void draw_headline(Ui& ui, const Box& box);

}  // namespace lw::panel
