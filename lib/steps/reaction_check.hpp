// What a free reaction must fulfil before numbers go in.
#pragma once
#include <optional>
#include <string>
#include <vector>

#include "halostep/structure.hpp"

namespace halostep {

/// "C +1, H -2": right minus left, by element and isotope label; empty when the reaction balances.
std::string imbalance(const ReactionText& r);
/// Deuterium and tritium are refused as in substrates: their bonds differ too much to borrow those of hydrogen.
std::optional<Error> hydrogen_isotope(const ReactionText& r);
/// The first metal or noble gas: where the table lacks something, this is the better reason.
std::optional<Error> metal_of(const ReactionText& r);
/// Labels of heavy atoms do not change the figures, as for substrates.
void drop_labels(std::vector<Molecule>& side);

}  // namespace halostep
