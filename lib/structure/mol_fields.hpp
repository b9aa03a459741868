// Fields of a MOL record and what they may hold; shared by the V2000 and V3000 readers.
#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "halostep/error.hpp"
#include "mol_record.hpp"

namespace halostep {

/// Columns [from, from + width) without the blanks around; empty beyond the end of the line.
std::string_view column(std::string_view line, std::size_t from, std::size_t width);
std::optional<int> integer(std::string_view field);
std::optional<double> real(std::string_view field);
/// "line 5" of the index 4.
std::string line_place(std::size_t index);

/// Sets symbol and isotope. Errors: wildcard for query symbols, element for what is none.
std::optional<Error> set_symbol(MolAtom& atom, std::string_view symbol);
/// `name` is CHG, RAD, ISO (V2000), MASS or VAL (V3000); others are passed over.
std::optional<Error> set_property(MolAtom& atom, std::string_view name, int value);
/// Nothing for single, double, triple and aromatic; wildcard for query bonds, domain for bonds that are not covalent.
std::optional<Error> bond_fault(int type);

}  // namespace halostep
