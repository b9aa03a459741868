#include "structures.hpp"

#include <fmt/format.h>

#include <cstdlib>
#include <fstream>

#include "halostep/structure.hpp"

namespace halostep::bench {
namespace {

struct Structures {
  std::vector<std::string> smiles;
  std::vector<Molecule> molecules;
};

const Structures& structures() {
  static const Structures all = [] {
    Structures s;
    std::ifstream in(HALOSTEP_BENCH_SMILES);
    for (std::string line; std::getline(in, line);) {
      line.resize(std::min(line.find_first_of(" \t"), line.size()));
      auto m = parse_smiles(line);
      if (!m.ok()) continue;
      s.smiles.push_back(line);
      s.molecules.push_back(std::move(m).value());
    }
    if (s.smiles.empty()) {
      fmt::print(stderr, "no structures in {} (Debian package rdkit-data)\n", HALOSTEP_BENCH_SMILES);
      std::exit(2);
    }
    return s;
  }();
  return all;
}

}  // namespace

const std::vector<std::string>& accepted_smiles() { return structures().smiles; }
const std::vector<Molecule>& accepted_molecules() { return structures().molecules; }
std::string alkane(int carbons) { return std::string(static_cast<std::size_t>(carbons), 'C'); }

}  // namespace halostep::bench
