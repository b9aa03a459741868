// What the benchmarks run over.
#pragma once
#include <string>
#include <vector>

#include "halostep/molecule.hpp"

namespace halostep::bench {

/// SMILES (without names) of the lines of the NCI file that halostep accepts: the same for every case.
/// Ends the program with a message when the file cannot be read.
const std::vector<std::string>& accepted_smiles();
/// The same, read.
const std::vector<Molecule>& accepted_molecules();
/// n-Alkane of n carbons, as text.
std::string alkane(int carbons);

}  // namespace halostep::bench
