// species.csv.
#pragma once
#include <string>

#include "tables/evidence.hpp"
#include "tables/structures.hpp"

namespace halostep {

/// Reads the file into Table::species_rows and combines them into Table::species. Returns the lines read.
std::size_t read_species(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                         Faults& faults);

}  // namespace halostep
