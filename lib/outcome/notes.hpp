// What competes with the attack on C-H and is not in the shares.
#pragma once
#include <string>
#include <vector>

#include "bonds/analysis.hpp"
#include "halostep/engine.hpp"

namespace halostep {

std::vector<std::string> competing_channels(const Analysis& a, Halogen x);

}  // namespace halostep
