// Counts of the heavy elements packed into one number: tells cheaply that a molecule cannot be in the table.
#pragma once
#include <cstdint>
#include <string_view>

#include "halostep/molecule.hpp"

namespace halostep {

/// Equal for equal heavy-atom compositions; hydrogens and isotopes are not seen.
std::uint64_t heavy_signature(const Molecule& m) noexcept;
/// The same from a SMILES text.
std::uint64_t heavy_signature(std::string_view smiles) noexcept;
/// What one more atom of element `z` adds to a signature.
std::uint64_t element_signature(int z) noexcept;

}  // namespace halostep
