#include "tables/read_species.hpp"

#include "tables/combine_rows.hpp"

namespace halostep {
namespace {

constexpr Range kEnthalpy{-3000, 1500}, kEntropy{0, 3000, true}, kHeatCapacity{0, 3000, true}, kU{0, 200};

std::optional<double> scaled(std::optional<double> v, double by) {
  if (!v) return std::nullopt;
  return *v * by;
}

/// Enthalpy with its u and coverage: all three or none.
void read_enthalpy(const Row& row, SpeciesRow& r) {
  const double scale = row.word("unit", words::energy) == "kcal/mol" ? kKjPerKcal : 1.0;
  r.dfh298 = scaled(row.number("dfh298", {kEnthalpy.lo / scale, kEnthalpy.hi / scale}), scale);
  r.u = scaled(row.number("u", {kU.lo / scale, kU.hi / scale}), scale);
  r.coverage = row.text("coverage");
  if (!r.coverage.empty() || !row.text("dfh298").empty()) row.word("coverage", words::coverage);
  if (row.text("dfh298").empty() != row.text("u").empty())
    row.fault("dfh298 and u must both be given or both be empty");
  if (row.text("dfh298").empty() && !r.coverage.empty()) row.fault("coverage without dfh298");
}

/// All values a row gives, for telling duplicates.
std::string values_text(const SpeciesRow& r) {
  const auto text = [](const std::optional<double>& v) { return v ? fmt::format("{}", *v) : std::string("-"); };
  return fmt::format("{} {} {}", text(r.dfh298), text(r.s298), text(r.cp298));
}

}  // namespace

std::size_t read_species(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                         Faults& faults) {
  const auto sheet = read_sheet(dir, "species.csv",
                                {"smiles", "name", "phase", "dfh298", "unit", "u", "coverage", "s298", "cp298",
                                 "method", "provenance", "source", "status", "reason", "note"},
                                faults);
  std::vector<SpeciesKey> keys;
  Duplicates duplicates;
  for (std::size_t i = 0; i < sheet.lines.size(); ++i) {
    const Row row(sheet, i, faults);
    SpeciesRow r;
    r.smiles = row.text("smiles");
    r.name = row.needed("name");
    r.phase = row.word("phase", words::phase);
    read_enthalpy(row, r);
    r.s298 = row.number("s298", kEntropy);
    r.cp298 = row.number("cp298", kHeatCapacity);
    read_evidence(row, sources, r);
    if (row.text("dfh298").empty() && row.text("s298").empty() && row.text("cp298").empty()) {
      row.fault("none of dfh298, s298 and cp298 is given");
    }
    SpeciesKey key;
    if (const auto* s = structures.in(row, "smiles")) {
      key = {species_key(*s), s->canonical};
      duplicates.check(row, fmt::format("{} {} {} {}", key.key, r.phase, values_text(r), r.source));
    }
    keys.push_back(std::move(key));
    table.species_rows.push_back(std::move(r));
  }
  combine_species(table, keys);
  return sheet.lines.size();
}

}  // namespace halostep
