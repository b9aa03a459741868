// Bond strengths for people and as CSV.
#include <fmt/format.h>

#include "phrases.hpp"

namespace halostep {

namespace {

std::string count_text(double count) {
  return count == static_cast<int>(count) ? fmt::format("{}", static_cast<int>(count)) : format_fixed(count, 3);
}

Grid bonds_grid(const Table& table, const BondsRecord& record, EnergyUnit unit) {
  const std::string name = energy_unit_name(unit);
  Grid grid;
  grid.indent = "  ";
  grid.columns = {{"bond", false},        {"n", true},         {"radical formed", false}, {"type", false},
                  {"D298 " + name, true}, {"u " + name, true}, {"route", false},          {"sources", false}};
  for (const auto& b : record.bonds) {
    std::vector<std::string> row{b.bond, std::to_string(b.h_count > 0 ? b.h_count : b.bond_count), b.radical, b.type};
    add_quantity(row, b.d298, unit);
    row.push_back(!b.d298 ? "none" : std::string(route_name(b.route)) + (b.extrapolated ? " (thin)" : ""));
    row.push_back(source_cell(table, b.sources));
    grid.rows.push_back(std::move(row));
  }
  return grid;
}

std::string evidence_text(const BondsRecord& record, EnergyUnit unit) {
  std::string out;
  const std::string name = energy_unit_name(unit);
  for (const auto& b : record.bonds) {
    if (b.contributions.empty()) continue;
    Grid grid;
    grid.indent = "    ";
    const bool typed = b.route == Route::typed;
    grid.columns = {{typed ? "correction" : "row of evidence", false},
                    {typed ? "count" : "weight", true},
                    {(typed ? "value " : "D298 ") + name, true},
                    {"u " + name, true},
                    {typed ? "rows" : "", true}};
    for (const auto& c : b.contributions) {
      auto text = energy_text(c.value, unit);
      grid.rows.push_back({c.name, count_text(c.count), std::move(text.value), std::move(text.u),
                           typed ? std::to_string(c.support) : ""});
    }
    out += fmt::format("\n  behind {} of {} ({})\n", b.bond, b.radical, route_name(b.route)) + aligned(grid);
  }
  return out;
}

std::string reasons_text(const BondsRecord& record) {
  std::string out;
  for (const auto& b : record.bonds) {
    if (!b.why) continue;
    const std::string what = b.d298 ? "note on " : "no value for ";
    const std::string which = b.radical.empty() ? "" : " to " + b.radical;
    out += wrapped(what + b.bond + which + ": " + error_line(*b.why), 118, "  ");
  }
  return out;
}

}  // namespace

std::string bonds_text(const Table& table, std::span<const BondsRecord> records, const TextOptions& options) {
  std::string out;
  std::set<int> cited;
  bool answered = false;
  for (const auto& record : records) {
    out += head_text(record.head);
    if (!record.bonds.empty()) {
      answered = true;
      out += aligned(bonds_grid(table, record, options.unit)) + reasons_text(record);
      if (options.evidence) out += evidence_text(record, options.unit);
    }
    for (const auto& b : record.bonds) cited.insert(b.sources.begin(), b.sources.end());
    out += '\n';
  }
  if (!answered) return out + table_line(table);
  out +=
      legend({"n: equivalent hydrogens, or equivalent bonds where no hydrogen is lost. D298: enthalpy of breaking the "
              "bond, gas, 298.15 K. u: its standard uncertainty; D +/- 2u holds about 95 %.",
              "route: measured = rows of the table for this very bond, adjusted together with what is tied to them; adjusted = "
              "from the adjusted enthalpies of its parts; typed = fitted type value plus group corrections; (thin) = few rows behind a correction, u widened. --evidence lists what is behind."});
  return out + source_list(table, cited) + table_line(table);
}

std::string bonds_csv(const Table& table, std::span<const BondsRecord> records, EnergyUnit unit) {
  Grid grid;
  grid.columns = head_columns();
  const std::string suffix = unit_suffix(unit);
  add_columns(grid.columns, {"bond", "radical", "h_count", "bond_count", "type", "d298_" + suffix, "u_" + suffix,
                             "route", "extrapolated", "sources", "why"});
  for (auto& column : error_columns()) grid.columns.push_back(column);
  for (const auto& record : records) {
    const auto head = head_cells(record.head);
    const auto tail = error_cells(record.head.error);
    const auto add = [&](std::vector<std::string> cells) {
      cells.insert(cells.begin(), head.begin(), head.end());
      cells.insert(cells.end(), tail.begin(), tail.end());
      grid.rows.push_back(std::move(cells));
    };
    if (record.bonds.empty()) add(std::vector<std::string>(11));
    for (const auto& b : record.bonds) {
      add({b.bond, b.radical, std::to_string(b.h_count), std::to_string(b.bond_count), b.type,
           csv_energy(b.d298 ? std::optional(b.d298->value) : std::nullopt, unit),
           csv_energy(b.d298 ? std::optional(b.d298->u) : std::nullopt, unit), b.d298 ? route_name(b.route) : "",
           b.extrapolated ? "true" : "false", source_ids(table, b.sources), b.why ? error_line(*b.why) : ""});
    }
  }
  return csv(grid);
}

}  // namespace halostep
