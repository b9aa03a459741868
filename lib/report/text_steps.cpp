// Chain steps and free reactions for people and as CSV.
#include <fmt/format.h>

#include <cmath>

#include "phrases.hpp"

namespace halostep {

namespace {

constexpr std::size_t kCells = 20;  // of a CSV line, without input and error

/// "12.3 ± 0.4"; a small u gets the decimals it needs.
std::string pair_cell(const std::optional<Quantity>& q, double scale, int decimals) {
  if (!q || !std::isfinite(q->value)) return "-";
  const double u = scale * q->u;
  decimals = decimals_for(u, decimals);
  return format_fixed(scale * q->value, decimals) + " ± " + format_fixed(u, decimals);
}

Grid steps_grid(EnergyUnit unit) {
  const std::string name = energy_unit_name(unit);
  Grid grid;
  grid.indent = "  ";
  grid.columns = {{"X", false},           {"step", false},         {"reaction", false},
                  {"T K", true},          {"dH298 " + name, true}, {"u " + name, true},
                  {"dS J/(mol K)", true}, {"dG " + name, true},    {"log10 K", true},
                  {"Ea " + name, true},   {"k cm3/s", true}, {"u log10 k", true}};
  return grid;
}

void add_step(Grid& grid, const StepAnswer& s, EnergyUnit unit) {
  std::vector<std::string> row{s.halogen ? halogen_name(*s.halogen) : "", step_kind_name(s.kind), s.reaction,
                               format_fixed(s.temperature, 2)};
  add_quantity(row, s.dh, unit);
  const double scale = from_kj(1.0, unit);
  row.push_back(pair_cell(s.ds, 1, 1));
  row.push_back(pair_cell(s.dg, scale, 1));
  row.push_back(pair_cell(s.log10_k, 1, 2));
  row.push_back(s.ea ? pair_cell(s.ea, scale, 1) : "");
  row.push_back(s.k_cm3_s ? format_scientific(*s.k_cm3_s, 3) : "");
  row.push_back(s.k_cm3_s ? format_fixed(s.u_log10_k_cm3_s, 2) : "");
  grid.rows.push_back(std::move(row));
}

/// Each reason once, with the kind of step it concerns.
std::string reasons_text(std::span<const StepAnswer> steps) {
  std::set<std::string> said;
  std::string out;
  for (const auto& s : steps) {
    for (const auto& [absent, quantity, why] :
         {std::tuple(!s.dh, "dH", &s.why_dh), std::tuple(!s.ds, "dS, dG, K", &s.why_ds),
          std::tuple(!s.ea && s.kind == StepKind::abstraction, "Ea, k", &s.why_ea)}) {
      if (!absent || why->empty()) continue;
      const std::string line = fmt::format("no {}: {}", quantity, *why);
      if (said.insert(line).second) out += wrapped(line, 118, "  ");
    }
  }
  return out;
}

std::string evidence_text(const Table& table, std::span<const StepAnswer> steps) {
  std::string out = "\n";
  for (const auto& s : steps) {
    if (!s.dh) continue;
    out += wrapped(fmt::format("{}: dH from {}; {}", s.reaction, s.route, source_ids(table, s.sources)), 118, "    ");
  }
  return out;
}

void cite(std::set<int>& cited, std::span<const StepAnswer> steps) {
  for (const auto& s : steps) cited.insert(s.sources.begin(), s.sources.end());
}

std::string block(const Table& table, std::span<const StepAnswer> steps, const TextOptions& options,
                  std::set<int>& cited) {
  Grid grid = steps_grid(options.unit);
  for (const auto& s : steps) add_step(grid, s, options.unit);
  cite(cited, steps);
  std::string out = aligned(grid) + reasons_text(steps);
  if (options.evidence) out += evidence_text(table, steps);
  return out;
}

std::optional<double> value(const std::optional<Quantity>& q) { return q ? std::optional(q->value) : std::nullopt; }
std::optional<double> u(const std::optional<Quantity>& q) { return q ? std::optional(q->u) : std::nullopt; }

/// Why values are missing, e.g. "ds: the table lacks S of C[CH]C; ea: ...".
std::string reasons_cell(const StepAnswer& s) {
  std::string out;
  for (const auto& [absent, name, why] :
       {std::tuple(!s.dh, "dh", &s.why_dh), std::tuple(!s.ds, "ds, dg, log10_k", &s.why_ds),
        std::tuple(!s.ea && (s.kind == StepKind::abstraction || s.kind == StepKind::elementary), "ea, k", &s.why_ea)}) {
    if (absent && !why->empty()) out += fmt::format("{}{}: {}", out.empty() ? "" : "; ", name, *why);
  }
  return out;
}

std::vector<std::string> step_cells(const Table& table, const StepAnswer& s, EnergyUnit unit) {
  return {s.halogen ? halogen_name(*s.halogen) : "",
          step_kind_name(s.kind),
          s.reaction,
          s.radical,
          csv_number(s.temperature),
          csv_energy(s.dh ? std::optional(s.dh->value) : std::nullopt, unit),
          csv_energy(s.dh ? std::optional(s.dh->u) : std::nullopt, unit),
          csv_number(value(s.ds)),
          csv_number(u(s.ds)),
          csv_energy(value(s.dg), unit),
          csv_energy(u(s.dg), unit),
          csv_number(value(s.log10_k)),
          csv_number(u(s.log10_k)),
          csv_energy(value(s.ea), unit),
          csv_energy(u(s.ea), unit),
          csv_number(s.k_cm3_s),
          csv_number(s.k_cm3_s ? std::optional(s.u_log10_k_cm3_s) : std::nullopt),
          s.route,
          source_ids(table, s.sources),
          reasons_cell(s)};
}

}  // namespace

std::string steps_text(const Table& table, std::span<const StepsRecord> records,
                       std::span<const ReactionRecord> reactions, const TextOptions& options) {
  std::string out;
  std::set<int> cited;
  bool answered = false;
  for (const auto& record : records) {
    answered = answered || !record.steps.empty();
    out += head_text(record.head);
    if (!record.steps.empty()) out += block(table, record.steps, options, cited);
    out += '\n';
  }
  for (const auto& reaction : reactions) {
    answered = answered || reaction.step;
    out += reaction.input + '\n';
    if (reaction.error) out += "  not answered: " + error_line(*reaction.error) + '\n';
    if (reaction.step) out += block(table, std::span(&*reaction.step, 1), options, cited);
    out += '\n';
  }
  if (!answered) return out + table_line(table);
  out += legend(
      {"dH298: enthalpy of the step as written, gas, 298.15 K; u: its standard uncertainty. dS, dG, K: at T, "
       "standard state 1 bar; - where the table lacks the data. Ea, k: Arrhenius activation energy (may be "
       "negative) and rate coefficient of all equivalent hydrogens at T, abstraction at carbon only. ±: standard "
       "uncertainty.",
       "initiation: X2 -> 2 X.; abstraction: X. + RH -> HX + R.; transfer: R. + X2 -> RX + X.; net: RH + X2 -> RX + "
       "HX; a chain needs abstraction not far uphill and net below zero."});
  out += source_list(table, cited) + caution_text() + '\n' + table_line(table);
  return out;
}

std::string steps_csv(const Table& table, std::span<const StepsRecord> records,
                      std::span<const ReactionRecord> reactions, EnergyUnit unit) {
  Grid grid;
  grid.columns = head_columns();
  const std::string suffix = unit_suffix(unit);
  add_columns(grid.columns, {"halogen", "kind", "reaction", "radical", "temperature_k", "dh_" + suffix, "u_" + suffix,
                             "ds_j_mol_k", "u_ds_j_mol_k", "dg_" + suffix, "u_dg_" + suffix, "log10_k", "u_log10_k", "ea_" + suffix,
                             "u_ea_" + suffix, "k_cm3_s", "u_log10_k_cm3_s", "route", "sources", "why"});
  for (auto& column : error_columns()) grid.columns.push_back(column);
  const auto add = [&](std::vector<std::string> row, std::vector<std::string> cells,
                       const std::optional<Error>& error) {
    row.insert(row.end(), cells.begin(), cells.end());
    for (auto& cell : error_cells(error)) row.push_back(std::move(cell));
    grid.rows.push_back(std::move(row));
  };
  for (const auto& record : records) {
    if (record.steps.empty()) add(head_cells(record.head), std::vector<std::string>(kCells), record.head.error);
    for (const auto& s : record.steps) add(head_cells(record.head), step_cells(table, s, unit), record.head.error);
  }
  for (const auto& r : reactions) {
    const auto cells = r.step ? step_cells(table, *r.step, unit) : std::vector<std::string>(kCells);
    add({r.input, "", "", ""}, cells, r.error);
  }
  return csv(grid);
}

}  // namespace halostep
