// halostep bonds: the strength of every bond that can break.
#include <memory>

#include "common.hpp"

namespace halostep::command {

namespace {

int run(const CLI::App& app, const Options& options) {
  const auto settings = check(options);
  if (!settings.ok()) return complain(settings.error()), kUsage;
  auto inputs = read_inputs(app, options, false);
  if (!inputs.ok()) return complain(inputs.error()), kUsage;
  const auto engine = open_engine(options);
  if (!engine) return kTableFault;

  Tally tally;
  std::vector<BondsRecord> records;
  for (auto& input : inputs.value()) {
    BondsRecord record{std::move(input.head), {}};
    if (!record.head.error) {
      auto bonds = engine->bonds(*input.molecule, {options.typed, true});
      if (bonds.ok()) {
        record.bonds = std::move(bonds).value();
      } else {
        record.head.error = bonds.error();
      }
    }
    if (record.head.error) {
      record.head.error = refuse(input, *record.head.error);
      tally.refused(*record.head.error);
    } else {
      tally.answered();
    }
    records.push_back(std::move(record));
  }

  const auto& table = engine->table();
  const auto& s = settings.value();
  switch (s.format) {
    case Format::json: return write_out(bonds_json(table, records), tally.exit_code());
    case Format::csv: return write_out(bonds_csv(table, records, s.text.unit), tally.exit_code());
    case Format::text: break;
  }
  return write_out(bonds_text(table, records, s.text), tally.exit_code());
}

}  // namespace

void add_bonds(CLI::App& app, int& exit_code) {
  auto options = std::make_shared<Options>();
  CLI::App* sub = app.add_subcommand("bonds", "strength of every X-H, C-X and weak bond, with uncertainty and source");
  add_common(*sub, *options);
  add_input(*sub, *options);
  set_usage(*sub, "halostep bonds [options] SMILES... | --file FILE | -");
  sub->footer("Example: halostep bonds 'CC(C)C' 'Cc1ccccc1' --evidence");
  sub->callback([sub, options, &exit_code] { exit_code = run(*sub, *options); });
}

}  // namespace halostep::command
