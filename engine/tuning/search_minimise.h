// The lowest value of a function of a few numbers that can only be tried: no derivatives, jumps and flat
// stretches welcome, with limits that come before the value.
//
// The method is the evolution strategy with covariance matrix adaptation, CMA-ES (Hansen 2016, "The CMA
// Evolution Strategy: A Tutorial", arXiv 1604.00772, with its default parameters): a cloud of tries is drawn
// around a mean, and mean, size and shape of the cloud follow the better half. It uses nothing but the order
// of the tries. When a run has closed in, it starts afresh with a cloud of twice as many (Auger and Hansen
// 2005, "A restart CMA evolution strategy with increasing population size"), until the tries are used up.
//
// Order: of two tries the one that breaks its limits less is better, and of two that break none the one with
// the lower value (Deb 2000, "An efficient constraint handling method for genetic algorithms").
//
// Points lie in the unit box, every number in [0, 1]; tries beyond it are put on its border. Draws are a
// function of the seed alone (numeric/random.h), so that a search can be repeated.
#pragma once

#include <cstdint>
#include <functional>
#include <vector>

namespace lw {

/// What a try is worth.
struct Worth {
  double breach = 0.0;  // how far limits are broken; 0 = none is
  double value = 0.0;   // to be low
};
bool better(const Worth& a, const Worth& b);

struct MinimiseSettings {
  int evaluations = 600;    // tries in all, > 0
  double spread = 0.25;     // standard deviation of the first cloud, in (0, 1]
  double closed_in = 1e-9;  // a run ends when its cloud is smaller than this
  std::uint64_t seed = 1;
};

struct Minimised {
  std::vector<double> point;
  Worth worth;
  int evaluations = 0;
  int runs = 0;          // clouds that were started
  bool stopped = false;  // by go_on
};

/// Tries the starts (each of the same size, at least one, not empty), then searches from the best of them.
/// `go_on` is asked before every try and ends the search by false; it may be empty.
Minimised minimise(const std::vector<std::vector<double>>& starts,
                   const std::function<Worth(const std::vector<double>&)>& worth_of,
                   const MinimiseSettings& settings = {},
                   const std::function<bool(const Minimised& so_far)>& go_on = {});

}  // namespace lw
