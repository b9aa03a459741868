// All curated files of a directory.
#pragma once
#include <string>
#include <utility>
#include <vector>

#include "halostep/tables.hpp"
#include "tables/faults.hpp"

namespace halostep {

/// The rows with their combined values, without fitted models. To be used only when there are no faults.
struct Curated {
  Table table;
  std::vector<std::pair<std::string, std::size_t>> rows_per_file;  // in the order of file_list.txt
};

/// Reads and checks all files of `dir`. Faults come in the order of the files, then of the lines.
Curated read_tables(const std::string& dir, Faults& faults);

}  // namespace halostep
