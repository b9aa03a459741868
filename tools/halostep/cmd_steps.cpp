// halostep steps: every step of the chain, or one elementary step written as reaction SMILES.
#include <memory>

#include "common.hpp"

namespace halostep::command {

namespace {

struct Asked {
  std::vector<StepsRecord> records;
  std::vector<ReactionRecord> reactions;
  Tally tally;
};

void answer_substrate(const Engine& engine, const Options& options, const Settings& settings, Input& input,
                      Asked& out) {
  StepsRecord record{std::move(input.head), {}};
  for (const double t : settings.temperatures) {
    if (record.head.error) break;
    auto steps = engine.steps(*input.molecule, settings.halogens, t, {options.typed, true});
    if (steps.ok()) {
      for (auto& step : steps.value()) record.steps.push_back(std::move(step));
    } else {
      record.head.error = steps.error();
    }
  }
  if (record.head.error) {
    record.head.error = refuse(input, *record.head.error);
    out.tally.refused(*record.head.error);
  } else {
    out.tally.answered();
  }
  out.records.push_back(std::move(record));
}

void answer_reaction(const Engine& engine, const Settings& settings, const Input& input, Asked& out) {
  for (const double t : settings.temperatures) {
    ReactionRecord record{input.head.input, {}, {}};
    auto step = engine.reaction(input.head.input, t);
    if (step.ok()) {
      record.step = std::move(step).value();
      out.tally.answered();
    } else {
      record.error = refuse(input, step.error());
      out.tally.refused(*record.error);
    }
    out.reactions.push_back(std::move(record));
    if (out.reactions.back().error) return;  // the same at every temperature
  }
}

int run(const CLI::App& app, const Options& options) {
  const auto settings = check(options);
  if (!settings.ok()) return complain(settings.error()), kUsage;
  auto inputs = read_inputs(app, options, true);
  if (!inputs.ok()) return complain(inputs.error()), kUsage;
  const auto engine = open_engine(options);
  if (!engine) return kTableFault;

  Asked asked;
  const auto& s = settings.value();
  for (auto& input : inputs.value()) {
    if (input.is_reaction) {
      answer_reaction(*engine, s, input, asked);
    } else {
      answer_substrate(*engine, options, s, input, asked);
    }
  }
  const auto& table = engine->table();
  const int code = asked.tally.exit_code();
  switch (s.format) {
    case Format::json: return write_out(steps_json(table, asked.records, asked.reactions), code);
    case Format::csv: return write_out(steps_csv(table, asked.records, asked.reactions, s.text.unit), code);
    case Format::text: break;
  }
  return write_out(steps_text(table, asked.records, asked.reactions, s.text), code);
}

}  // namespace

void add_steps(CLI::App& app, int& exit_code) {
  auto options = std::make_shared<Options>();
  CLI::App* sub = app.add_subcommand("steps", "enthalpy, entropy, equilibrium and barrier of every chain step");
  add_common(*sub, *options);
  add_input(*sub, *options);
  add_halogens(*sub, *options);
  add_temperatures(*sub, *options);
  sub->add_option("--reaction", options->reactions, "one elementary step as reaction SMILES (repeatable)")
      ->expected(1)
      ->allow_extra_args(false)
      ->multi_option_policy(CLI::MultiOptionPolicy::TakeAll);
  set_usage(*sub, "halostep steps [options] SMILES... | 'A.B>>C.D'... | --file FILE | -");
  sub->footer(
      "Example: halostep steps 'CC(C)C' --halogen Cl --halogen Br --temperature 60C\n"
      "Example: halostep steps --reaction '[Br].CC(C)C>>Br.C[C](C)C'");
  sub->callback([sub, options, &exit_code] { exit_code = run(*sub, *options); });
}

}  // namespace halostep::command
