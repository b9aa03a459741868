// halostep outcome: rates and shares of the C-H sites, and the comparison for one wanted site.
#include <fmt/format.h>

#include <memory>

#include "common.hpp"

namespace halostep::command {

namespace {

struct Wanted {
  int atom = -1;
  std::string chosen_by;
  std::optional<Halogen> halogen;  // of the wanted product
};

/// An unreadable value of an option, placed at the option.
Error placed_at(const char* option, Error e) {
  e.place = e.place.empty() ? option : fmt::format("{}, {}", option, e.place);
  return e;
}

/// The site whose radical is the one asked for.
Result<int> site_of_radical(const Molecule& m, std::span<const SiteOutcome> sites, const std::string& text) {
  const auto radical = parse_smiles(text, ParseMode::species);
  if (!radical.ok()) return placed_at("--site", radical.error());
  const auto hash = structure_hash(radical.value());
  for (const auto& site : sites) {
    if (structure_hash(m.without_hydrogen(site.atom)) == hash) return site.atom;
  }
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).hydrogens == 0 || structure_hash(m.without_hydrogen(i)) != hash) continue;
    const bool carbon = m.atom(i).element == element::C;
    return Error{ErrorClass::domain,
                 carbon ? "no measured rates for the C-H that gives " + text : text + " comes from no C-H of the substrate",
                 "--site"};
  }
  return Error{ErrorClass::domain, "no C-H site of the substrate gives the radical " + text, "--site"};
}

/// The site where a halogen in place of H gives the product asked for.
Result<Wanted> site_of_product(const Molecule& m, std::span<const SiteOutcome> sites, const std::string& text) {
  const auto product = parse_smiles(text);
  if (!product.ok()) return placed_at("--product", product.error());
  const auto hash = structure_hash(product.value());
  for (const auto& site : sites) {
    for (const Halogen x : kAllHalogens) {
      if (structure_hash(m.with_substituent(site.atom, halogen_element(x))) == hash)
        return Wanted{site.atom, "product", x};
    }
  }
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).hydrogens == 0 || m.atom(i).element != element::C) continue;
    for (const Halogen x : kAllHalogens) {
      if (structure_hash(m.with_substituent(i, halogen_element(x))) == hash)
        return Error{ErrorClass::domain, "no measured rates for the C-H that gives " + text, "--product"};
    }
  }
  return Error{ErrorClass::domain, "no C-H site of the substrate gives " + text + " by taking up one halogen",
               "--product"};
}

int weakest_site(std::span<const SiteOutcome> sites) {
  const auto lower = [](const SiteOutcome& a, const SiteOutcome& b) { return a.dh.value < b.dh.value; };
  return std::min_element(sites.begin(), sites.end(), lower)->atom;
}

Result<Wanted> wanted_site(const Molecule& m, const HalogenOutcome& outcome, const Options& options) {
  if (!options.site.empty()) {
    const auto atom = site_of_radical(m, outcome.sites, options.site);
    if (!atom.ok()) return atom.error();
    return Wanted{atom.value(), "site", std::nullopt};
  }
  if (!options.product.empty()) return site_of_product(m, outcome.sites, options.product);
  return Wanted{weakest_site(outcome.sites), "weakest C-H", std::nullopt};
}

std::optional<Error> compare(const Engine& engine, const Molecule& m, const Options& options, const Settings& settings,
                             OutcomeRecord& record) {
  if (record.halogens.empty() || record.halogens.front().sites.empty()) return std::nullopt;
  const auto wanted = wanted_site(m, record.halogens.front(), options);
  if (!wanted.ok()) return wanted.error();
  // The net enthalpy is the same at every temperature.
  const auto steps = engine.steps(m, settings.halogens, settings.temperatures.front(), {options.typed, true});
  if (!steps.ok()) return steps.error();
  auto comparison = compare_site(record.halogens, steps.value(), wanted.value().atom, wanted.value().chosen_by,
                                 wanted.value().halogen);
  if (!comparison.ok()) return comparison.error();
  record.comparison = std::move(comparison).value();
  return std::nullopt;
}

/// Medium and conversion of the options, checked against the table.
Result<OutcomeOptions> outcome_options(const Engine& engine, const Options& options) {
  OutcomeOptions o;
  o.typed = options.typed;
  const auto medium = engine.medium(options.medium);
  if (!medium.ok()) return Error{ErrorClass::usage, medium.error().message, "--medium"};
  o.medium = options.medium;
  const auto conversion = parse_number(options.conversion), ratio = parse_number(options.halogen_ratio);
  if (!conversion.ok()) return Error{ErrorClass::usage, conversion.error().message, "--conversion"};
  if (!ratio.ok()) return Error{ErrorClass::usage, ratio.error().message, "--halogen-ratio"};
  o.conversion = conversion.value();
  o.halogen_ratio = ratio.value();
  const auto left = check_conversion(o.conversion, o.halogen_ratio);
  if (left) return Error{ErrorClass::usage, left->message, "--conversion"};
  return o;
}

void answer(const Engine& engine, const Options& options, const OutcomeOptions& conditions, const Settings& settings, const Input& input,
            OutcomeRecord& record) {
  for (const double t : settings.temperatures) {
    auto halogens = engine.outcome(*input.molecule, settings.halogens, t, conditions);
    if (!halogens.ok()) {
      record.head.error = halogens.error();
      return;
    }
    for (auto& h : halogens.value()) record.halogens.push_back(std::move(h));
  }
  if (!options.compare) return;
  record.head.error = compare(engine, *input.molecule, options, settings, record);
  if (record.head.error) record.halogens.clear();
}

int run(const CLI::App& app, const Options& options) {
  const auto settings = check(options);
  if (!settings.ok()) return complain(settings.error()), kUsage;
  auto inputs = read_inputs(app, options, false);
  if (!inputs.ok()) return complain(inputs.error()), kUsage;
  const auto engine = open_engine(options);
  if (!engine) return kTableFault;
  const auto conditions = outcome_options(*engine, options);
  if (!conditions.ok()) return complain(conditions.error()), kUsage;

  Tally tally;
  const auto& s = settings.value();
  std::vector<OutcomeRecord> records;
  for (auto& input : inputs.value()) {
    OutcomeRecord record{std::move(input.head), {}, {}};
    if (!record.head.error) answer(*engine, options, conditions.value(), s, input, record);
    if (record.head.error) {
      record.head.error = refuse(input, *record.head.error);
      tally.refused(*record.head.error);
    } else {
      tally.answered();
    }
    records.push_back(std::move(record));
  }
  const auto& table = engine->table();
  switch (s.format) {
    case Format::json: return write_out(outcome_json(table, records), tally.exit_code());
    case Format::csv: return write_out(outcome_csv(table, records, s.text.unit), tally.exit_code());
    case Format::text: break;
  }
  return write_out(outcome_text(table, records, s.text), tally.exit_code());
}

}  // namespace

void add_outcome(CLI::App& app, int& exit_code) {
  auto options = std::make_shared<Options>();
  CLI::App* sub = app.add_subcommand("outcome", "rate, share and selectivity of every C-H site for each halogen");
  add_common(*sub, *options);
  add_input(*sub, *options);
  add_halogens(*sub, *options);
  add_temperatures(*sub, *options);
  sub->add_option("--medium", options->medium,
                  "\"benzene 8 M\", \"CS2 12 M\", neat, CCl4, gas: complexing solvents make chlorine more selective")
      ->capture_default_str();
  sub->add_option("--conversion", options->conversion, "of the substrate, 0 to 1: the HX formed takes radicals back")
      ->capture_default_str();
  sub->add_option("--halogen-ratio", options->halogen_ratio, "X2 per substrate at the start")->capture_default_str();
  auto* compare_flag = sub->add_flag("--compare", options->compare,
                                     "one wanted site against halogens and temperatures, and the best choice");
  auto* site = sub->add_option("--site", options->site, "the wanted site: SMILES of its radical")->needs(compare_flag);
  auto* product = sub->add_option("--product", options->product, "the wanted product: SMILES of a monohalide");
  product->needs(compare_flag)->excludes(site);
  set_usage(*sub, "halostep outcome [options] SMILES... | --file FILE | -");
  sub->footer(
      "Example: halostep outcome 'CC(C)C' --halogen Br --temperature 127C\n"
      "Example: halostep outcome 'CC(C)C' --compare --product 'CC(C)(C)Br' --temperature 25C --temperature 127C\n"
      "Example: halostep outcome 'CC(C)C(C)C' --halogen Cl --medium 'benzene 8 M'\n"
      "Example: halostep outcome 'CCC' --halogen Br --temperature 127C --conversion 0.5");
  sub->callback([sub, options, &exit_code] { exit_code = run(*sub, *options); });
}

}  // namespace halostep::command
