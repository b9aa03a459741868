// `table`: what the curated table holds, in text, CSV and JSON.
#include <fmt/format.h>

#include <algorithm>

#include "json_parts.hpp"
#include "phrases.hpp"
#include "table_rows.hpp"

namespace halostep {

namespace {

struct Count {
  const char* key;
  const char* text;
  std::size_t n;
};

template <class Rows>
std::size_t current(const Rows& rows) {
  return static_cast<std::size_t>(std::count_if(rows.begin(), rows.end(), [](const auto& r) { return !r.superseded; }));
}

std::vector<Count> counts_of(const Table& t) {
  const auto xh = static_cast<std::size_t>(
      std::count_if(t.bonds.begin(), t.bonds.end(), [](const BondEntry& b) { return b.leaving == "[H]"; }));
  return {{"sources", "sources", t.sources.size()},
          {"bonds_to_hydrogen", "bonds to hydrogen", xh},
          {"other_bonds", "other bonds", t.bonds.size() - xh},
          {"bond_rows", "rows of evidence for bonds", t.bond_rows.size()},
          {"bond_rows_current", "  of these current", current(t.bond_rows)},
          {"species", "species", t.species.size()},
          {"species_rows", "rows of evidence for species", t.species_rows.size()},
          {"rates", "rate coefficients", t.rates.size()},
          {"relative_rates", "relative rates", t.relative_rates.size()},
          {"mixture_rows", "rows of measured mixtures", t.mixtures.size()},
          {"models", "fitted models", t.models.size()}};
}

CellTable cells_for(const Table& table, const TableQuery& query) {
  switch (query.view) {
    case TableView::rows: return cell_rows(table, query.kind);
    case TableView::sources: return cell_sources(table);
    case TableView::show: return cell_rows_of_bonds(table, query.bonds);
    case TableView::models: return cell_models(table);
    case TableView::summary: break;
  }
  CellTable out{{{"what"}, {"count"}}, {}};
  for (const auto& c : counts_of(table)) out.rows.push_back({std::string(c.key), static_cast<int>(c.n)});
  return out;
}

std::string cell_text(const Cell& cell, EnergyUnit unit, bool full) {
  struct Visitor {
    EnergyUnit unit;
    bool full;
    std::string operator()(std::monostate) const { return {}; }
    std::string operator()(const std::string& s) const { return s; }
    std::string operator()(double v) const { return fmt::format("{:.{}g}", v, full ? 8 : 5); }
    std::string operator()(Energy e) const {
      return full ? csv_energy(e.kj_mol, unit) : energy_text(Quantity{e.kj_mol, e.u}, unit).value;
    }
    std::string operator()(int v) const { return std::to_string(v); }
    std::string operator()(bool v) const { return v ? "true" : "false"; }
  };
  return std::visit(Visitor{unit, full}, cell);
}

bool is_number(const Cell& cell) {
  return std::holds_alternative<double>(cell) || std::holds_alternative<Energy>(cell) ||
         std::holds_alternative<int>(cell);
}

Grid grid_of(const CellTable& cells, EnergyUnit unit, bool full) {
  Grid grid;
  std::vector<std::size_t> kept;
  for (std::size_t c = 0; c < cells.columns.size(); ++c) {
    const auto& column = cells.columns[c];
    if (column.wide && !full) continue;
    kept.push_back(c);
    std::string header = column.name;
    if (column.energy)
      header += full ? std::string("_") + unit_suffix(unit) : std::string(" ") + energy_unit_name(unit);
    const bool right =
        std::any_of(cells.rows.begin(), cells.rows.end(), [&](const auto& r) { return is_number(r[c]); });
    grid.columns.push_back({std::move(header), right});
  }
  for (const auto& row : cells.rows) {
    std::vector<std::string> line;
    for (const std::size_t c : kept) line.push_back(cell_text(row[c], unit, full));
    grid.rows.push_back(std::move(line));
  }
  return grid;
}

Json json_cell(const Cell& cell) {
  struct Visitor {
    Json operator()(std::monostate) const { return nullptr; }
    Json operator()(const std::string& s) const { return s; }
    Json operator()(double v) const { return rounded(v, 10); }
    Json operator()(Energy e) const { return rounded(e.kj_mol, 9); }
    Json operator()(int v) const { return v; }
    Json operator()(bool v) const { return v; }
  };
  return std::visit(Visitor{}, cell);
}

Json json_rows(const CellTable& cells) {
  Json out = Json::array();
  for (const auto& row : cells.rows) {
    JsonRecord record;
    for (std::size_t c = 0; c < row.size(); ++c) {
      const std::string key = cells.columns[c].name + (cells.columns[c].energy ? "_kj_mol" : "");
      if (std::holds_alternative<std::monostate>(row[c])) {
        record.put_null(key.c_str(), "the row does not hold it");
      } else {
        record.put(key.c_str(), json_cell(row[c]));
      }
    }
    out.push_back(record.finish());
  }
  return out;
}

Json json_combined(const Table& table, const std::vector<int>& bonds) {
  Json out = Json::array();
  for (const int i : bonds) {
    const auto& b = table.bonds[static_cast<std::size_t>(i)];
    out.push_back({{"molecule", b.molecule},
                   {"radical", b.radical},
                   {"leaving", b.leaving},
                   {"d298_kj_mol", rounded(b.d298.value, 9)},
                   {"u_kj_mol", rounded(b.d298.u, 9)},
                   {"rows_d298_kj_mol", rounded(b.combined.value, 9)},
                   {"rows_u_kj_mol", rounded(b.combined.u, 9)},
                   {"rows", json_rows(cell_rows_of_bonds(table, {i}))}});
  }
  return out;
}

std::string summary_text(const Table& table) {
  Grid grid;
  grid.columns = {{"holds", false}, {"number", true}};
  for (const auto& c : counts_of(table)) grid.rows.push_back({c.text, std::to_string(c.n)});
  return fmt::format("Table layout {}\ncontent hash  {}\norigin        {}\n\n", table.layout, table.content_hash,
                     table.origin) +
         aligned(grid);
}

std::string show_text(const Table& table, const TableQuery& query, EnergyUnit unit) {
  std::string out;
  std::set<int> cited;
  for (const int i : query.bonds) {
    const auto& b = table.bonds[static_cast<std::size_t>(i)];
    const auto d = energy_text(b.d298, unit), own = energy_text(b.combined, unit);
    out += fmt::format("{} -> {} + {}   D298 {} u {} {} by the joint adjustment; these rows alone {} u {}\n", b.molecule, b.radical,
                       b.leaving, d.value, d.u, energy_unit_name(unit), own.value, own.u);
    CellTable cells = cell_rows_of_bonds(table, {i});
    for (std::size_t c = 0; c < 3; ++c) cells.columns[c].wide = true;  // said in the line above
    Grid grid = grid_of(cells, unit, false);
    grid.indent = "  ";
    out += aligned(grid) + '\n';
    for (const int r : b.rows) cited.insert(table.bond_rows[static_cast<std::size_t>(r)].source);
  }
  return out + source_list(table, cited);
}

}  // namespace

std::string table_text(const Table& table, const TableQuery& query, EnergyUnit unit) {
  if (query.view == TableView::summary) return summary_text(table);
  if (query.view == TableView::show) return show_text(table, query, unit) + table_line(table);
  return aligned(grid_of(cells_for(table, query), unit, false)) + '\n' + table_line(table);
}

std::string table_csv(const Table& table, const TableQuery& query, EnergyUnit unit) {
  return csv(grid_of(cells_for(table, query), unit, true));
}

std::string table_json(const Table& table, const TableQuery& query) {
  constexpr const char* kNotAsked = "not asked for; see halostep table --help";
  Json top = json_top(table, "halostep.table/1");
  JsonRecord record;
  Json counts = Json::object();
  for (const auto& c : counts_of(table)) counts[c.key] = c.n;
  record.put("counts", std::move(counts));
  if (query.view == TableView::rows) {
    record.put("kind", row_kind_name(query.kind));
    record.put("rows", json_rows(cell_rows(table, query.kind)));
  } else {
    record.put_null("kind", kNotAsked);
    record.put_null("rows", kNotAsked);
  }
  query.view == TableView::sources ? record.put("sources", json_rows(cell_sources(table)))
                                   : record.put_null("sources", kNotAsked);
  query.view == TableView::show ? record.put("bonds", json_combined(table, query.bonds))
                                : record.put_null("bonds", kNotAsked);
  query.view == TableView::models ? record.put("models", json_rows(cell_models(table)))
                                  : record.put_null("models", kNotAsked);
  top.update(record.finish());
  return dumped(top);
}

}  // namespace halostep
