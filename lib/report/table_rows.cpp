#include "table_rows.hpp"

#include <cmath>

namespace halostep {

namespace {

Cell text(const std::string& s) { return s.empty() ? Cell{} : Cell{s}; }
Cell number(const std::optional<double>& v) { return v ? Cell{*v} : Cell{}; }
Cell energy(const std::optional<double>& v, const std::optional<double>& u = {}) {
  return v ? Cell{Energy{*v, u.value_or(0.0)}} : Cell{};
}
Cell status(bool superseded) { return std::string(superseded ? "superseded" : "current"); }
Cell use(bool fitted) { return std::string(fitted ? "fit" : "show"); }
Cell source(const Table& t, int s) { return s < 0 ? Cell{} : Cell{t.sources[static_cast<std::size_t>(s)].id}; }

const std::vector<CellColumn> kBondColumns{{"molecule"}, {"radical"},  {"leaving"}, {"d298", true},
                                           {"u", true},  {"coverage"}, {"method"},  {"provenance"},
                                           {"source"},   {"status"},   {"reason"},  {"note"}};

std::vector<Cell> bond_cells(const Table& t, const BondRow& r) {
  return {r.molecule,       r.radical,      r.leaving,          Energy{r.d298, r.u}, Energy{r.u, r.u},
          text(r.coverage), text(r.method), text(r.provenance), source(t, r.source), status(r.superseded),
          text(r.reason),   text(r.note)};
}

CellTable bonds(const Table& t) {
  CellTable out{kBondColumns, {}};
  for (const auto& r : t.bond_rows) out.rows.push_back(bond_cells(t, r));
  return out;
}

CellTable species(const Table& t) {
  CellTable out{{{"smiles"},
                 {"name"},
                 {"phase"},
                 {"dfh298", true},
                 {"u", true},
                 {"coverage"},
                 {"s298_j_mol_k"},
                 {"cp298_j_mol_k"},
                 {"method"},
                 {"provenance"},
                 {"source"},
                 {"status"},
                 {"reason"},
                 {"note", false, true}},
                {}};
  for (const auto& r : t.species_rows) {
    out.rows.push_back({r.smiles, text(r.name), r.phase, energy(r.dfh298, r.u), energy(r.u, r.u), text(r.coverage),
                        number(r.s298), number(r.cp298), text(r.method), text(r.provenance), source(t, r.source),
                        status(r.superseded), text(r.reason), text(r.note)});
  }
  return out;
}

CellTable rates(const Table& t) {
  CellTable out{{{"carrier"}, {"molecule"}, {"radical"},  {"reaction"},         {"type"},       {"unit"},
                 {"h_count"}, {"a"},        {"n"},        {"ea", true},         {"k298"},       {"t_min_k"},
                 {"t_max_k"}, {"u_log10"},  {"coverage"}, {"method"},           {"provenance"}, {"source"},
                 {"status"},  {"use"},      {"reason"},   {"note", false, true}},
                {}};
  for (const auto& r : t.rates) {
    out.rows.push_back({text(r.carrier),
                        text(r.molecule),
                        text(r.radical),
                        text(r.reaction),
                        text(r.type),
                        text(r.unit),
                        r.h_count > 0 ? Cell{r.h_count} : Cell{},
                        number(r.a),
                        r.n,
                        energy(r.ea),
                        number(r.k298),
                        number(r.t_min),
                        number(r.t_max),
                        r.u_log10,
                        text(r.coverage),
                        text(r.method),
                        text(r.provenance),
                        source(t, r.source),
                        status(r.superseded),
                        use(r.fitted),
                        text(r.reason),
                        text(r.note)});
  }
  return out;
}

CellTable relative(const Table& t) {
  CellTable out{{{"reagent"},
                 {"molecule"},
                 {"radical"},
                 {"reference_molecule"},
                 {"reference_radical"},
                 {"ratio_per_h"},
                 {"t_k"},
                 {"medium"},
                 {"u_log10"},
                 {"method"},
                 {"provenance"},
                 {"source"},
                 {"status"},
                 {"use"},
                 {"reason"},
                 {"note", false, true}},
                {}};
  for (const auto& r : t.relative_rates) {
    out.rows.push_back({r.reagent, r.molecule, r.radical, r.reference_molecule, r.reference_radical, r.ratio, r.t,
                        text(r.medium), r.u_log10, text(r.method), text(r.provenance), source(t, r.source),
                        status(r.superseded), use(r.fitted), text(r.reason), text(r.note)});
  }
  return out;
}

CellTable mixtures(const Table& t) {
  CellTable out{{{"reagent"},
                 {"molecule"},
                 {"product"},
                 {"fraction"},
                 {"t_k"},
                 {"medium"},
                 {"method"},
                 {"provenance"},
                 {"source"},
                 {"status"},
                 {"use"},
                 {"reason"},
                 {"note", false, true}},
                {}};
  for (const auto& r : t.mixtures) {
    out.rows.push_back({r.reagent, r.molecule, r.product, r.fraction, r.t, text(r.medium), text(r.method),
                        text(r.provenance), source(t, r.source), status(r.superseded), use(r.fitted), text(r.reason),
                        text(r.note)});
  }
  return out;
}

}  // namespace

const char* row_kind_name(RowKind kind) noexcept {
  switch (kind) {
    case RowKind::bonds: return "bonds";
    case RowKind::species: return "species";
    case RowKind::rates: return "rates";
    case RowKind::relative_rates: return "relative-rates";
    case RowKind::mixtures: return "mixtures";
  }
  return "bonds";
}

CellTable cell_rows(const Table& table, RowKind kind) {
  switch (kind) {
    case RowKind::bonds: return bonds(table);
    case RowKind::species: return species(table);
    case RowKind::rates: return rates(table);
    case RowKind::relative_rates: return relative(table);
    case RowKind::mixtures: return mixtures(table);
  }
  return {};
}

CellTable cell_rows_of_bonds(const Table& table, const std::vector<int>& bonds) {
  CellTable out{kBondColumns, {}};
  for (const int b : bonds) {
    for (const int r : table.bonds[static_cast<std::size_t>(b)].rows) {
      out.rows.push_back(bond_cells(table, table.bond_rows[static_cast<std::size_t>(r)]));
    }
  }
  return out;
}

CellTable cell_sources(const Table& table) {
  CellTable out{{{"id"}, {"year"}, {"kind"}, {"doi"}, {"doi_basis"}, {"citation"}}, {}};
  for (const auto& s : table.sources) {
    out.rows.push_back({s.id, s.year > 0 ? Cell{s.year} : Cell{}, text(s.kind), text(s.doi), text(s.doi_basis), text(s.citation)});
  }
  return out;
}

CellTable cell_models(const Table& table) {
  CellTable out{{{"model"}, {"parameter"}, {"value"}, {"u"}, {"rows"}}, {}};
  for (const auto& m : table.models) {
    const std::size_t n = m.parameters.size();
    for (std::size_t i = 0; i < n; ++i) {
      const bool has_u = m.covariance.size() == n * n && m.covariance[i * n + i] >= 0;
      out.rows.push_back({m.name, m.parameters[i], m.values[i],
                          has_u ? Cell{std::sqrt(m.covariance[i * n + i])} : Cell{},
                          i < m.support.size() ? Cell{m.support[i]} : Cell{}});
    }
    for (const auto& [name, value] : m.settings) out.rows.push_back({m.name, "setting " + name, value, Cell{}, Cell{}});
  }
  return out;
}

}  // namespace halostep
