// The part of check_mol for V3000 records.
#pragma once
#include "mol_check.hpp"

namespace halostep {

void check_v3000(const std::vector<std::string_view>& lines, MolCheck& out);

}  // namespace halostep
