// The rows of the table as one network of formation enthalpies (gas, 298.15 K, kJ/mol).
#pragma once
#include <map>
#include <string>
#include <unordered_map>
#include <vector>

#include "adjust/network.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// How a row of the table came into the network.
enum class RowUse {
  enthalpy,      // a row of species_rows
  bond,          // a row of bond_rows, as the bond energy it gives
  bond_enthalpy  // a derived row of bond_rows, as the enthalpy of the radical it was derived from
};

struct NetworkRow {
  RowUse use = RowUse::enthalpy;
  int row = 0;  // index into species_rows or bond_rows
  int source = -1;
  int about = 0;  // unknown the row tells about: the species, or the radical of the bond
};

struct LeftOutRows {
  int count = 0;
  std::vector<std::string> rows;  // names of the observations they would have been
};

struct EnthalpyNetwork {
  Network network;
  std::vector<NetworkRow> rows;                 // one per observation
  std::vector<bool> relative;                   // per unknown: only differences to its part's datum are known
  std::vector<int> datum;                       // per unknown: that datum, or -1
  std::vector<double> weight;                   // per unknown: its change per change of that datum
  std::unordered_map<std::string, int> at;      // species key -> unknown
  std::map<std::string, LeftOutRows> left_out;  // by reason

  /// Unknown of a species given as SMILES; -1 when it is not in the network.
  [[nodiscard]] int find(const std::string& smiles) const;
  /// radical + leaving - molecule; empty when one of them is not in the network.
  [[nodiscard]] LinearForm bond_form(const BondEntry& bond) const;
};

/// Unknowns: every species with a current gas row and every part of a bond with a current row, radicals up to
/// resonance, without stereo. H2, F2, Cl2, O2, N2 are fixed at zero. Parts of the network that no enthalpy reaches get
/// a datum (a molecule fixed at zero) and are marked relative: their bond energies are adjusted, their enthalpies not
/// known. Observations are the current rows. A bond row that is itself a sum of enthalpies of formation is left out
/// when its source gives the radical's enthalpy (it would count twice), comes in as the radical's enthalpy when its
/// note says it, is left out when it is a sum of enthalpies of others, and counts as a bond energy otherwise.
EnthalpyNetwork enthalpy_network(const Table& table);

/// Prints the adjustment; with `csv` not empty writes system and solution there. Exit code of the command.
int adjust_report(const Table& table, const std::string& csv);

}  // namespace halostep
