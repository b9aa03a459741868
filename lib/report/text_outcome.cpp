// Rates, shares and the comparison for people and as CSV.
#include <fmt/format.h>

#include <algorithm>
#include <set>

#include "phrases.hpp"

namespace halostep {

namespace {

std::string percent_range(double low, double high) { return percent(low) + " to " + percent(high); }

std::string sites_text(const HalogenOutcome& outcome, EnergyUnit unit) {
  const std::string name = energy_unit_name(unit);
  Grid grid;
  grid.indent = "    ";
  grid.columns = {{"radical formed", false}, {"H", true},          {"type", false},
                  {"dH298 " + name, true},   {"u " + name, true},  {"Ea " + name, true},
                  {"k cm3/s", true},         {"u(log10 k)", true}, {"TS", true},
                  {"share %", true},         {"95 % range", true}, {"", false}};
  for (const auto& s : outcome.sites) {
    std::vector<std::string> row{s.radical, std::to_string(s.h_count), s.type};
    add_quantity(row, s.dh, unit);
    row.push_back(energy_cell(s.ea, unit) + " ± " + energy_cell(s.u_ea, unit));
    row.push_back(format_scientific(s.k_cm3_s, 3));
    row.push_back(format_fixed(s.u_log10_k, decimals_for(s.u_log10_k, 2)));
    const auto ts = quantity_text({s.ts_position, s.u_ts_position}, 2);
    row.push_back(ts.value + " ± " + ts.u);
    row.push_back(percent(s.share));
    row.push_back(percent_range(s.share_low, s.share_high));
    row.push_back(s.extrapolated ? "extrapolated" : "");
    grid.rows.push_back(std::move(row));
  }
  return aligned(grid);
}

std::string selectivity_text(const HalogenOutcome& outcome) {
  if (outcome.selectivity.empty()) return {};
  // Most answers are for an inert medium and the first attack; their table stays narrow.
  const bool medium = std::any_of(outcome.selectivity.begin(), outcome.selectivity.end(), [](const Selectivity& s) { return s.medium != 0; });
  const bool reversal = std::any_of(outcome.selectivity.begin(), outcome.selectivity.end(), [](const Selectivity& s) { return s.reversal != 0; });
  Grid grid;
  grid.indent = "    ";
  grid.columns = {{"ln(k/k) of", false}, {"against", false},  {"total", true},
                  {"enthalpy", true},    {"curvature", true}, {"polar", true},
                  {"number of H", true}, {"A factor", true},  {"encounter", true}};
  if (medium) grid.columns.push_back({"medium", true});
  if (reversal) grid.columns.push_back({"reversal", true});
  for (const auto& s : outcome.selectivity) {
    grid.rows.push_back({outcome.sites[static_cast<std::size_t>(s.a)].radical,
                         outcome.sites[static_cast<std::size_t>(s.b)].radical, format_fixed(s.ln_ratio, 2),
                         format_fixed(s.enthalpy, 2), format_fixed(s.curvature, 2), format_fixed(s.polar, 2),
                         format_fixed(s.statistical, 2), format_fixed(s.a_factor, 2), format_fixed(s.encounter, 2)});
    if (medium) grid.rows.back().push_back(format_fixed(s.medium, 2));
    if (reversal) grid.rows.back().push_back(format_fixed(s.reversal, 2));
  }
  return aligned(grid);
}

std::string notes_text(const HalogenOutcome& outcome) {
  std::string out;
  for (const auto& note : outcome.notes) out += wrapped("note: " + note, 118, "    ");
  std::set<std::string> said;
  for (const auto& s : outcome.sites) {
    if (s.extrapolated && said.insert(s.why_extrapolated).second) {
      out += wrapped("extrapolated: " + s.why_extrapolated, 118, "    ");
    }
  }
  return out;
}

std::string halogen_text(const HalogenOutcome& outcome, EnergyUnit unit) {
  std::string out = fmt::format("  {}. at {} K: k total {} cm3/s", halogen_name(outcome.halogen),
                                format_fixed(outcome.temperature, 2), format_scientific(outcome.k_total, 3));
  if (outcome.slope) {
    const auto slope = quantity_text(*outcome.slope, 2);
    out += fmt::format("; Evans-Polanyi slope over the {} {} (u {})", outcome.slope_over, slope.value, slope.u);
  }
  if (outcome.medium != "gas") out += "; medium " + outcome.medium;
  if (outcome.conversion > 0) {
    out += fmt::format("; conversion {}, HX per X2 {}", format_fixed(outcome.conversion, 3), format_fixed(outcome.hx_per_x2, 3));
  }
  return out + "\n" + sites_text(outcome, unit) + selectivity_text(outcome) + notes_text(outcome);
}

std::string comparison_text(const Comparison& c, EnergyUnit unit) {
  const std::string name = energy_unit_name(unit);
  Grid grid;
  grid.indent = "    ";
  grid.columns = {{"", false},
                  {"X", false},
                  {"T K", true},
                  {"share %", true},
                  {"95 % range", true},
                  {"k cm3/s", true},
                  {"abstraction " + name, true},
                  {"net " + name, true},
                  {"verdict", false}};
  for (std::size_t i = 0; i < c.rows.size(); ++i) {
    const auto& r = c.rows[i];
    grid.rows.push_back({static_cast<int>(i) == c.best ? ">" : "", halogen_name(r.halogen),
                         format_fixed(r.temperature, 2), percent(r.share), percent_range(r.share_low, r.share_high),
                         format_scientific(r.k_cm3_s, 3),
                         energy_cell(r.dh_abstraction ? std::optional(r.dh_abstraction->value) : std::nullopt, unit),
                         energy_cell(r.dh_net ? std::optional(r.dh_net->value) : std::nullopt, unit), r.verdict});
  }
  return fmt::format("  wanted site {} ({} H, chosen by {})\n", c.wanted, c.h_count, c.chosen_by) + aligned(grid) +
         wrapped("best choice: " + c.why, 118, "    ");
}

/// What competes, each said once: under the comparison the blocks of the halogens are left out.
std::string compared_notes(const OutcomeRecord& record) {
  std::set<Halogen> asked;
  std::vector<std::pair<std::string, std::set<Halogen>>> said;
  for (const auto& outcome : record.halogens) {
    asked.insert(outcome.halogen);
    for (const auto& note : outcome.notes) {
      auto at = std::find_if(said.begin(), said.end(), [&](const auto& s) { return s.first == note; });
      if (at == said.end()) at = said.insert(said.end(), {note, {}});
      at->second.insert(outcome.halogen);
    }
  }
  std::string out;
  for (const auto& [note, of] : said) {
    std::string names;
    for (const Halogen x : of) names += (names.empty() ? "" : ", ") + std::string(halogen_name(x));
    out += wrapped("note: " + (of == asked ? "" : names + ": ") + note, 118, "    ");
  }
  return out;
}

std::string record_text(const OutcomeRecord& record, const TextOptions& options) {
  std::string out = head_text(record.head);
  if (record.comparison) {
    out += comparison_text(*record.comparison, options.unit);
    if (!options.evidence) out += compared_notes(record);
  }
  if (!record.comparison || options.evidence) {
    for (const auto& outcome : record.halogens) out += halogen_text(outcome, options.unit) + '\n';
  }
  if (out.size() < 2 || out[out.size() - 2] != '\n') out += '\n';
  return out;
}

}  // namespace

std::string outcome_text(const Table& table, std::span<const OutcomeRecord> records, const TextOptions& options) {
  std::string out;
  std::set<int> cited;
  bool answered = false, compared = false;
  for (const auto& record : records) {
    out += record_text(record, options);
    compared = compared || record.comparison;
    answered = answered || !record.halogens.empty();
    for (const auto& outcome : record.halogens) cited.insert(outcome.sources.begin(), outcome.sources.end());
  }
  if (!answered) return out + table_line(table);
  out += legend(
      {"H: equivalent hydrogens. dH298: enthalpy of X. + RH -> HX + R., gas, 298.15 K; u: standard uncertainty. "
       "Ea: Arrhenius activation energy at T (may be negative). k: rate coefficient of all H of the site. ±: standard uncertainty.",
       "TS: position of the transition state, 0 like the reactants, 1 like the products. share: of the C-H sites; "
       "first attack in an inert medium unless a medium or conversion is named. The second table splits ln(k/k) into the parts it is the "
       "sum of.",
       "extrapolated, outside the evidence: temperature or structure beyond the measured rates.",
       compared
           ? "verdict: enthalpy allows a chain where abstraction is not more than 100 kJ/mol uphill and net not above "
             "zero; initiation, termination and chain length were not computed. selective: the 95 % range of the "
             "share begins at 90 % or above. slow: an atom meets the site less than once a second at 1 mol/L."
           : ""});
  return out + source_list(table, cited) + caution_text() + '\n' + table_line(table);
}

}  // namespace halostep
