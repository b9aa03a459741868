// Fields of a MOL record and what they may hold; shared by the V2000 and V3000 checks.
#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "halostep/error.hpp"

namespace halostep {

/// Columns [from, from + width) without the blanks around; empty beyond the end of the line.
std::string_view column(std::string_view line, std::size_t from, std::size_t width);
std::optional<int> integer(std::string_view field);
std::optional<double> real(std::string_view field);
/// "line 5" of the index 4.
std::string line_place(std::size_t index);

/// Nothing for an element, D or T; wildcard for query symbols, element for what is neither.
std::optional<Error> symbol_fault(std::string_view symbol);
/// Nothing for single, double, triple and aromatic; wildcard for query bonds, domain for bonds that are not covalent.
std::optional<Error> bond_fault(int order);
/// `name` is CHG, RAD or ISO (V2000) or MASS (V3000).
std::optional<Error> property_fault(std::string_view name, int value);

}  // namespace halostep
