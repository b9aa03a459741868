// bonds_rh.csv and bonds_rx.csv.
#pragma once
#include <string>

#include "tables/combine_rows.hpp"
#include "tables/evidence.hpp"
#include "tables/structures.hpp"

namespace halostep {

/// Reads both files into Table::bond_rows and combines them into Table::bonds. Returns lines read from each.
struct BondCounts {
  std::size_t rh = 0, rx = 0;
};
BondCounts read_bonds(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                      Faults& faults);

}  // namespace halostep
