// halostep table: what the curated table holds and where each number comes from.
#include <memory>

#include "common.hpp"

namespace halostep::command {

namespace {

Result<RowKind> parse_kind(const std::string& text) {
  if (text == "bonds") return RowKind::bonds;
  if (text == "species") return RowKind::species;
  if (text == "rates") return RowKind::rates;
  if (text == "relative-rates") return RowKind::relative_rates;
  if (text == "mixtures") return RowKind::mixtures;
  return Error{ErrorClass::usage, "'" + text + "' is no kind of row: bonds, species, rates, relative-rates, mixtures",
               "--kind"};
}

/// Bonds of a molecule in the table, of one radical if `radical` is not empty.
Result<std::vector<int>> find_bonds(const Table& table, const std::string& molecule, const std::string& radical) {
  const auto m = parse_smiles(molecule);
  if (!m.ok()) return m.error();
  const std::string key = canonical_smiles(m.value(), false);
  std::string wanted;
  if (!radical.empty()) {
    const auto r = parse_smiles(radical, ParseMode::species);
    if (!r.ok()) return r.error();
    wanted = canonical_smiles(r.value(), false);
  }
  std::vector<int> out;
  for (std::size_t i = 0; i < table.bonds.size(); ++i) {
    const auto& b = table.bonds[i];
    if (b.molecule != key || (!wanted.empty() && b.radical != wanted && b.leaving != wanted)) continue;
    out.push_back(static_cast<int>(i));
  }
  if (out.empty()) {
    const std::string what = radical.empty() ? "no bond of " + molecule : "no bond of " + molecule + " to " + radical;
    return Error{ErrorClass::no_data, what + " is in the table", "table show"};
  }
  return out;
}

int write_table(const Engine& engine, const Settings& s, const TableQuery& query) {
  switch (s.format) {
    case Format::json: return write_out(table_json(engine.table(), query), kAnswered);
    case Format::csv: return write_out(table_csv(engine.table(), query, s.text.unit), kAnswered);
    case Format::text: break;
  }
  return write_out(table_text(engine.table(), query, s.text.unit), kAnswered);
}

struct TableOptions : Options {
  TableView view = TableView::summary;
  std::string kind = "bonds", molecule, radical;
};

int run(const TableOptions& options) {
  const auto settings = check(options);
  if (!settings.ok()) return complain(settings.error()), kUsage;
  const auto kind = parse_kind(options.kind);
  if (!kind.ok()) return complain(kind.error()), kUsage;
  const auto engine = open_engine(options);
  if (!engine) return kTableFault;
  TableQuery query{options.view, kind.value(), {}};
  if (options.view == TableView::show) {
    auto bonds = find_bonds(engine->table(), options.molecule, options.radical);
    if (!bonds.ok()) {
      complain(bonds.error());
      Tally tally;
      tally.refused(bonds.error());
      return tally.exit_code();
    }
    query.bonds = std::move(bonds).value();
  }
  return write_table(*engine, settings.value(), query);
}

}  // namespace

void add_table(CLI::App& app, int& exit_code) {
  auto options = std::make_shared<TableOptions>();
  CLI::App* sub = app.add_subcommand("table", "rows, sources, fitted models, version and hash of the table");
  add_common(*sub, *options);
  sub->require_subcommand(0, 1);
  set_usage(*sub, "halostep table [options] [rows | sources | show | models]");
  sub->footer(
      "Example: halostep table\nExample: halostep table rows --kind rates --format csv\n"
      "Example: halostep table show 'CC(C)C' 'C[C](C)C'");
  const auto add_view = [&](const char* name, const char* help, TableView view) {
    CLI::App* child = sub->add_subcommand(name, help);
    child->fallthrough();  // --format and the like may follow the view
    set_usage(*child, std::string("halostep table ") + name + (view == TableView::show ? " MOLECULE [RADICAL]" : "") +
                          " [options]");
    child->final_callback([options, view] { options->view = view; });
    return child;
  };
  auto* rows = add_view("rows", "all rows of one kind", TableView::rows);
  rows->add_option("--kind", options->kind, "bonds, species, rates, relative-rates or mixtures")->capture_default_str();
  rows->footer("Example: halostep table rows --kind species");
  add_view("sources", "the sources, with citation and DOI", TableView::sources)
      ->footer("Example: halostep table sources --format csv");
  auto* show = add_view("show", "the evidence for the bonds of one molecule", TableView::show);
  show->add_option("molecule", options->molecule, "SMILES of the molecule")->required();
  show->add_option("radical", options->radical, "SMILES of the radical formed, to pick one bond");
  show->footer("Example: halostep table show 'Cc1ccccc1'");
  add_view("models", "the fitted parameters with their uncertainty", TableView::models)
      ->footer("Example: halostep table models");
  sub->callback([options, &exit_code] { exit_code = run(*options); });
}

}  // namespace halostep::command
