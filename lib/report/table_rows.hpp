// Rows of the curated table as cells that know their kind, for text, CSV and JSON alike.
#pragma once
#include <string>
#include <variant>
#include <vector>

#include "halostep/report.hpp"

namespace halostep {

struct Energy {
  double kj_mol = 0;
  double u = 0;  // sets the decimals of the text
};
using Cell = std::variant<std::monostate, std::string, double, Energy, int, bool>;

struct CellColumn {
  std::string name;  // as in JSON; an energy column's name gets its unit appended
  bool energy = false;
  bool wide = false;  // left out of the text for people
};

struct CellTable {
  std::vector<CellColumn> columns;
  std::vector<std::vector<Cell>> rows;
};

/// All rows of one kind.
CellTable cell_rows(const Table& table, RowKind kind);
/// The rows behind some bonds.
CellTable cell_rows_of_bonds(const Table& table, const std::vector<int>& bonds);
CellTable cell_sources(const Table& table);
/// One line per fitted parameter.
CellTable cell_models(const Table& table);
const char* row_kind_name(RowKind kind) noexcept;

}  // namespace halostep
