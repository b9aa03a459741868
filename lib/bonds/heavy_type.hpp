// What a chemist calls a bond between two heavy atoms.
#pragma once
#include <string>

#include "analysis.hpp"

namespace halostep {

/// "primary C-Cl", "aryl C-Br", "peroxide O-O", "azo C-N", ...: the type of the answer to this bond.
std::string heavy_type(const Analysis& a, const HeavyBond& bond);

}  // namespace halostep
