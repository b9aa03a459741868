#include "tables/validate.hpp"

#include <fmt/format.h>

#include <fstream>
#include <functional>
#include <nlohmann/json.hpp>

#include "tables/fit.hpp"
#include "tables/reliability.hpp"
#include "tables/summary.hpp"
#include "tables/table_io.hpp"

namespace halostep {
namespace {

constexpr int kFolds = 10, kBondFolds = 40;
const std::string kDoubtful = "Values whose own u is above 10 kJ/mol do not judge, but for the class that says so.";

Validation sections() {
  Validation v;
  v.bonds = {"bonds", "D(C-H), typed", "kJ/mol", "median of the class over the molecules that are not held out",
             "Every C-H bond of the table whose molecule is held out, against its combined value; the answer is typed. " + kDoubtful, 1, {}, {}};
  v.halides = {"halides", "D(R-X)", "kJ/mol", "median over the halides of that halogen that are not held out",
               "Every C-X bond of the table whose halide is held out, from D(R-H) and the exchange model: D(R-H) as the engine has it "
               "without the halide (measured where it is), and in a class of its own typed too. " + kDoubtful, 1, {}, {}};
  v.sources = {"sources", "Measured bonds: each source against the others", "kJ/mol", "none",
               "Every current row of a bond that has several sources, against the combination of the rows of the other sources: "
               "the scatter of the literature, below which no model can be shown to be right.", 1, {}, {}};
  v.rates = {"rates", "Rate coefficients of abstraction", "log10 k",
             "Cl only: per H 9.7e-12 cm3/s on primary (and methyl), 3.8 times that on secondary, 5 times on tertiary carbon",
             "Every current rate row whose molecule is held out, at 298 K for Cl and F, in the middle of its range for Br and I.", 2, {}, {}};
  v.mixtures = {"mixtures", "Mixtures of monohalides", "mole fraction, mean absolute error of a mixture",
                "per H primary : secondary : tertiary 1:3.8:5 (Cl), 1:82:1600 (Br), 1:1.2:1.4 (F)",
                "Every measured mixture of two or more sites whose molecule is held out; what a row leaves unnamed is one more part, \"other\". "
                "Br2 at a conversion of 0.5 with one per substrate; neat arenes with toluene 8 M as the medium, which complexes "
                "chlorine as they do. Complexing solvents: the molarity left out of the solvent's fit, the substrate in (it is the only one). "
                "Classes that say so: the molecule alone held out of every file, its kin in. Compositions that were not measured are "
                "listed below with the reason.", 3, {}, {}};
  v.ratios = {"ratios", "Relative rates per H", "log10 ratio", "per H primary : secondary : tertiary 1:3.8:5 (Cl), 1:82:1600 (Br), 1:1.2:1.4 (F)",
              "Every measured ratio per H whose molecule is held out, in gas or an inert liquid; bromine at a conversion of 0.5. Sites that "
              "are their own reference, Hammett constants, scales not measured on the molecule and limits are not counted. The class \"order\": "
              "pairs that differ by more than 1.5; its error is 1 where the larger is not predicted as the larger.", 2, {}, {}};
  v.media = {"media", "Chlorine in complexing solvents", "ln of the ratio per H tertiary : primary",
             "the ratio of the neat substrate, in every solvent",
             "2,3-dimethylbutane. Each molarity and temperature is left out in turn of the fit of its solvent; 0.26 is 30 %. A solvent with one "
             "row cannot be left out: its row is shown as fitted.", 2, {}, {}};
  v.temperatures = {"temperatures", "Rate coefficients with temperature", "log10 k", "none",
                    "Rows with a range of 40 K or more: five temperatures over their own range within 200 to 700 K, beside the one nearest 298 K.", 2, {}, {}};
  v.reverse = {"reverse", "Activation energies of R + HX", "kJ/mol", "none",
               "Ea of the forward step at the middle of the range less dH(T) there, against measured ones. R + HX itself is in no fit.", 1, {}, {}};
  v.forms = {"forms", "What each term buys", "log10 k", "none",
             "Cl, rows near 298 K, the same folds: forms of the rate model, each with the terms of the one before, fitted anew.", 3, {}, {}};
  return v;
}

bool write(const std::string& path, const std::string& text) {
  if (path.empty()) return true;
  std::ofstream out(path, std::ios::binary);
  out << text;
  out.close();
  if (out) return true;
  fmt::print(stderr, "{}:0: cannot be written\n", path);
  return false;
}

// Bond models are quick to fit: their molecules are held out in smaller parts, and no rates are fitted meanwhile.
bool validate_bonds(const Table& table, Validation& v) {
  return each_fold(table, Folds(kBondFolds), fit_bond_models, [&](const FoldView& view) { judge_bonds(view, v); });
}

// `fitted`: the same rows with models of all of them.
bool judge_folds(const Table& table, const Table& fitted, Validation& v) {
  const auto whole = Engine::from_table(fitted);
  return each_fold(table, Folds(kFolds), fit_models, [&](const FoldView& view) {
    judge_rates(view, v);
    judge_mixtures(view, v);
    judge_ratios(view, v);
    judge_reverse(view, whole.value(), v);
    judge_forms(view, v);
  });
}

std::vector<const Section*> reported(const Validation& v) {
  return {&v.bonds, &v.halides, &v.sources, &v.rates, &v.temperatures, &v.forms, &v.reverse, &v.ratios, &v.mixtures, &v.media};
}

std::vector<const Section*> listed(const Validation& v) { return {&v.bonds, &v.halides, &v.rates, &v.reverse, &v.ratios, &v.mixtures, &v.media}; }

std::vector<ReliabilityCurve> curves_of(const Validation& v) {
  const auto z = [](const Section& s, const char* name) {
    std::vector<double> out;
    if (const auto it = s.classes.find(name); it != s.classes.end()) {
      for (const auto& [e, u] : it->second.judged) out.push_back(e / u);
    }
    return out;
  };
  return {reliability("D(C-H), typed", z(v.bonds, "all C-H")), reliability("D(R-X)", z(v.halides, "all C-X")),
          reliability("log k, Cl + C-H at 298 K", z(v.rates, "Cl + all")), reliability("shares of mixtures", v.share_z)};
}

std::function<bool(const std::string&)> starts(const char* with) {
  return [with](const std::string& g) { return g.starts_with(with); };
}

nlohmann::json judged_json(const Validation& v) {
  const struct {
    const char* name;
    const Section& section;
    std::function<bool(const std::string&)> wanted;
  } groups[] = {{"D(C-H)", v.bonds, [](const std::string& g) { return g.find("-H") == std::string::npos; }},
                {"D of O-H, N-H, S-H, Si-H", v.bonds, starts("O-H")},
                {"D(R-X)", v.halides, starts("")},
                {"rates, Cl", v.rates, starts("Cl")},
                {"rates, Br", v.rates, starts("Br")},
                {"rates, F", v.rates, starts("F")},
                {"activation energies of R + HX", v.reverse, starts("")},
                {"relative rates", v.ratios, starts("")},
                {"mixtures", v.mixtures, starts("")},
                {"solvents", v.media, starts("")}};
  auto out = nlohmann::json::array();
  for (const auto& g : groups) {
    const auto n = count_judged(g.section, g.wanted);
    out.push_back({{"group", g.name}, {"judged", n.judged}, {"excluded", n.excluded}, {"refused", n.refused}, {"excluded_share", n.excluded_share()}, {"left_out_share", n.left_out_share()}, {"not_asked", n.not_asked}});
  }
  return out;
}

std::string judged_markdown(const nlohmann::json& judged) {
  std::string out =
      "## Rows that judge\n\nEvery row and the reason of each that is left out: tests/reference/judged_rows.csv. Excluded: answered at least in "
      "part, but the row itself is doubtful or speaks of sites that are refused; the classes that end in \"too\" have them in. Refused: outside the "
      "domain, no answer to judge. Not asked: no measurement of what is judged.\n\n"
      "| rows | judged | excluded | excluded, share | refused | excluded or refused, share | not asked |\n|---|---|---|---|---|---|---|\n";
  for (const auto& g : judged)
    out += fmt::format("| {} | {} | {} | {:.1f} % | {} | {:.1f} % | {} |\n", g["group"].get<std::string>(), g["judged"].get<int>(), g["excluded"].get<int>(),
                       100 * g["excluded_share"].get<double>(), g["refused"].get<int>(), 100 * g["left_out_share"].get<double>(), g["not_asked"].get<int>());
  return out + "\n";
}

std::string reliability_markdown(const std::vector<ReliabilityCurve>& curves) {
  std::string out = "## Reliability\n\n![Nominal against observed coverage](reliability.svg)\n\nValues inside the interval, in %, by its nominal "
                    "coverage; u is that of the answer with the judge's own, for shares the half of the 95 % interval on that side.\n\n| |";
  for (const int p : kNominal) out += fmt::format(" {} |", p);
  out += "\n|---|";
  for (std::size_t i = 0; i < kNominal.size(); ++i) out += "---|";
  out += "\n";
  for (const auto& c : curves) {
    out += fmt::format("| {} ({}) |", c.name, c.rows);
    for (const double o : c.observed) out += fmt::format(" {:.0f} |", o);
    out += "\n";
  }
  return out + "\n";
}

std::string head(const std::string& hash) {
  return fmt::format(
      "# Validation\n\nWritten by `halostep-tables validate`. Molecules are held out of every file of the table at once, in {} folds ({} for bonds); "
      "molecules with the same kinds of C-H site (homologues) share a fold. All models are fitted anew for each fold and asked "
      "through the engine. Table {}.\n\n", kFolds, kBondFolds, hash);
}

nlohmann::json document(const Validation& v, const std::vector<ReliabilityCurve>& curves) {
  nlohmann::json doc = {{"schema", "halostep.validation/1"}, {"folds", kFolds}, {"bond_folds", kBondFolds}, {"sections", nlohmann::json::array()}};
  for (const auto* s : reported(v)) doc["sections"].push_back(section_json(*s));
  doc["judged"] = judged_json(v);
  doc["reliability"] = {{"nominal", kNominal}, {"curves", nlohmann::json::array()}};
  for (const auto& c : curves) doc["reliability"]["curves"].push_back({{"name", c.name}, {"rows", c.rows}, {"observed", c.observed}});
  doc["summary"] = summary_json(doc);
  return doc;
}

}  // namespace

bool each_fold(const Table& table, Folds folds, const FitFunction& fit, const std::function<void(const FoldView&)>& judge) {
  for (int f = 0; f < folds.count(); ++f) {
    Table t = without_fold(table, folds, f);
    auto models = fit(t);
    if (!models.ok()) {
      fmt::print(stderr, "fold {}: {}\n", f, models.error().message);
      return false;
    }
    t.models = std::move(models).value();
    const auto engine = Engine::from_table(std::move(t));
    judge({table, engine.value(), folds, f});
  }
  return true;
}

int validate(const Table& table, const ValidateFiles& files) {
  auto v = sections();
  Table fitted = table;
  auto all = fit_models(table);
  if (!all.ok()) {
    fmt::print(stderr, "{}\n", all.error().message);
    return 1;
  }
  fitted.models = std::move(all).value();
  if (!validate_bonds(table, v) || !judge_folds(table, fitted, v) || !judge_alone(table, v)) return 1;
  finish_rates(fitted, v);
  if (const auto error = judge_media(fitted, v)) {
    fmt::print(stderr, "solvents: {}\n", error->message);
    return 1;
  }
  judge_sources(table, v.sources);
  if (!judge_alone_mixtures(table, v)) return 1;
  const auto curves = curves_of(v);
  const auto doc = document(v, curves);
  auto text = head(content_hash(table).substr(0, 16)) + summary_markdown(doc["summary"]) + judged_markdown(doc["judged"]) + reliability_markdown(curves);
  for (const auto* s : reported(v)) text += section_markdown(*s);
  fmt::print("{}", text);
  const bool written = write(files.markdown, text) && write(files.json, doc.dump(1) + "\n") && write(files.plot, reliability_svg(curves)) &&
                       write(files.rows, judged_csv(listed(v)));
  return written ? 0 : 1;
}

}  // namespace halostep
