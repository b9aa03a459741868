// Rates, shares and the comparison as CSV: one line per site, halogen and temperature.
#include "phrases.hpp"

namespace halostep {

namespace {

constexpr std::size_t kCells = 25;

const char* truth(bool value) { return value ? "true" : "false"; }

/// The row of the comparison that a site of an outcome is, if any.
const CompareRow* compared(const OutcomeRecord& record, const HalogenOutcome& outcome, const std::string& radical) {
  if (!record.comparison || record.comparison->wanted != radical) return nullptr;
  for (const auto& row : record.comparison->rows) {
    if (row.halogen == outcome.halogen && row.temperature == outcome.temperature) return &row;
  }
  return nullptr;
}

/// best, verdict, propagates, hazardous, slow, net enthalpy and the reason of the choice; empty without a comparison.
void add_comparison(std::vector<std::string>& cells, const OutcomeRecord& record, const CompareRow* row,
                    EnergyUnit unit) {
  if (row == nullptr) {
    cells.insert(cells.end(), {record.comparison ? "false" : "", "", "", "", "", "", ""});
    return;
  }
  const auto& c = *record.comparison;
  const bool best = c.best >= 0 && row == &c.rows[static_cast<std::size_t>(c.best)];
  cells.insert(cells.end(), {truth(best), row->verdict, truth(row->propagates), truth(row->hazardous), truth(row->slow),
                             csv_energy(row->dh_net ? std::optional(row->dh_net->value) : std::nullopt, unit),
                             best || c.best < 0 ? c.why : ""});
}

std::vector<std::string> site_cells(const OutcomeRecord& record, const HalogenOutcome& outcome, const SiteOutcome& s,
                                    EnergyUnit unit) {
  std::vector<std::string> cells{halogen_name(outcome.halogen),
                                 csv_number(outcome.temperature),
                                 s.radical,
                                 std::to_string(s.h_count),
                                 s.type,
                                 csv_energy(s.dh.value, unit),
                                 csv_energy(s.dh.u, unit),
                                 csv_number(s.k_cm3_s),
                                 csv_number(s.u_log10_k),
                                 csv_energy(s.ea, unit),
                                 csv_number(s.ts_position),
                                 csv_number(s.share),
                                 csv_number(s.share_low),
                                 csv_number(s.share_high),
                                 truth(s.extrapolated),
                                 s.extrapolated ? "extrapolated: " + s.why_extrapolated : ""};
  add_comparison(cells, record, compared(record, outcome, s.radical), unit);
  cells.insert(cells.end(), {outcome.medium, csv_number(outcome.conversion)});
  return cells;
}

/// A site without a rate keeps its line and says why.
std::vector<std::string> refused_cells(const HalogenOutcome& outcome, const RefusedSite& s) {
  std::vector<std::string> cells(kCells);
  cells[0] = halogen_name(outcome.halogen);
  cells[1] = csv_number(outcome.temperature);
  cells[2] = s.radical;
  cells[3] = std::to_string(s.h_count);
  cells[4] = s.type;
  cells[15] = "no rate: " + s.why;
  cells[23] = outcome.medium;
  cells[24] = csv_number(outcome.conversion);
  return cells;
}

std::vector<std::vector<std::string>> outcome_rows(const OutcomeRecord& record, EnergyUnit unit) {
  std::vector<std::vector<std::string>> rows;
  for (const auto& outcome : record.halogens) {
    for (const auto& s : outcome.sites) rows.push_back(site_cells(record, outcome, s, unit));
    for (const auto& s : outcome.refused) rows.push_back(refused_cells(outcome, s));
  }
  if (rows.empty()) rows.emplace_back(kCells);
  return rows;
}

}  // namespace

std::string outcome_csv(const Table&, std::span<const OutcomeRecord> records, EnergyUnit unit) {
  Grid grid;
  grid.columns = head_columns();
  const std::string suffix = unit_suffix(unit);
  add_columns(grid.columns, {"halogen",   "temperature_k",    "radical",        "h_count",
                             "type",      "dh_" + suffix,     "u_dh_" + suffix, "k_cm3_s",
                             "u_log10_k", "ea_" + suffix,     "ts_position",    "share",
                             "share_low", "share_high",       "extrapolated",   "why",
                             "best",      "verdict",          "propagates",     "hazardous",
                             "slow",      "dh_net_" + suffix, "reason",         "medium",
                             "conversion"});
  for (auto& column : error_columns()) grid.columns.push_back(column);
  for (const auto& record : records) {
    for (auto& cells : outcome_rows(record, unit)) {
      std::vector<std::string> row = head_cells(record.head);
      row.insert(row.end(), cells.begin(), cells.end());
      for (auto& cell : error_cells(record.head.error)) row.push_back(std::move(cell));
      grid.rows.push_back(std::move(row));
    }
  }
  return csv(grid);
}

}  // namespace halostep
