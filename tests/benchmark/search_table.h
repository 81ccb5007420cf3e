// The gain search against every published rule, on every course of scenarios/.
#pragma once

namespace lw::benchmark {

/// Prints one row a scenario. Returns the number of scenarios on which a rule beats the search.
int print_search_table();

}  // namespace lw::benchmark
