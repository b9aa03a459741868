// Numbers, legends and source lists shared by the text and CSV reports.
#pragma once
#include <optional>
#include <set>
#include <span>
#include <string>

#include "grid.hpp"
#include "halostep/report.hpp"

namespace halostep {

/// Energy in the asked unit, one decimal; "-" when absent.
std::string energy_cell(std::optional<double> kj_mol, EnergyUnit unit, int decimals = 1);
/// Decimals, at least `least`, at which a value other than zero shows a digit other than zero.
int decimals_for(double value, int least) noexcept;
/// A value and its u as text, to the same number of decimals; a u other than zero shows at least one digit.
struct QuantityText {
  std::string value, u;
};
QuantityText quantity_text(const Quantity& q, int least_decimals);
/// The same for an energy in the asked unit; "-" and "-" when absent.
QuantityText energy_text(const std::optional<Quantity>& kj_mol, EnergyUnit unit);
/// Value and u as two cells.
void add_quantity(std::vector<std::string>& row, const std::optional<Quantity>& q, EnergyUnit unit);
/// Plain number in full for CSV, empty when absent.
std::string csv_number(std::optional<double> value);
std::string csv_energy(std::optional<double> kj_mol, EnergyUnit unit);
/// "kj_mol" or "kcal_mol", the suffix of CSV headers.
const char* unit_suffix(EnergyUnit unit) noexcept;
/// A share in per cent with enough decimals to keep 99.96 below 100 and 0.04 above 0.
std::string percent(double share);
/// The first ids of a source list, "blanksby2003 +3".
std::string source_cell(const Table& table, std::span<const int> sources, std::size_t shown = 2);
std::string source_ids(const Table& table, std::span<const int> sources);
/// The cited sources, id and full citation, in the order of their ids.
std::string source_list(const Table& table, const std::set<int>& cited);
/// First lines of a substrate's block: input, formula, canonical SMILES; the error, where there is one.
std::string head_text(const SubstrateHead& head);
/// "table ... layout 1, hash 0123456789ab (built-in)".
std::string table_line(const Table& table);
/// Columns of every CSV: input, name, smiles, formula ... and at the end error_class, error_message.
std::vector<std::string> head_cells(const SubstrateHead& head);
std::vector<GridColumn> head_columns();
std::vector<std::string> error_cells(const std::optional<Error>& error);
std::vector<GridColumn> error_columns();
/// Appends plain columns.
void add_columns(std::vector<GridColumn>& columns, std::initializer_list<std::string> names);
std::string legend(std::initializer_list<std::string> lines);

}  // namespace halostep
