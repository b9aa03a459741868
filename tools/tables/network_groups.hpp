// Which rows are one measurement told twice.
#pragma once
#include "tables/adjust_network.hpp"

namespace halostep {

/// Sets the group of the observations that share an error (called when the network is otherwise complete):
/// rows on one species from different sources that agree to the rounding of compilations, at least one of them no
/// measurement of its own; and rows on one radical of one source of measurements.
void group_copies(const Table& table, EnthalpyNetwork& net);

}  // namespace halostep
