#include "tables/validate.hpp"

#include <fmt/format.h>

#include <fstream>
#include <nlohmann/json.hpp>

#include "tables/fit.hpp"
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
                "Every measured mixture with two or more products whose molecule is held out, the shares of its products alone. "
                "Not counted: compositions computed back from scales or rate expressions, limits, textbook figures.", 3, {}, {}};
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
  Folds folds(kBondFolds);
  for (int f = 0; f < kBondFolds; ++f) {
    Table t = without_fold(table, folds, f);
    auto models = fit_bond_models(t);
    if (!models.ok()) {
      fmt::print(stderr, "fold {}: {}\n", f, models.error().message);
      return false;
    }
    t.models = std::move(models).value();
    const auto engine = Engine::from_table(std::move(t));
    judge_bonds({table, engine.value(), folds, f}, v);
  }
  return true;
}

}  // namespace

int validate(const Table& table, const std::string& markdown, const std::string& json) {
  auto v = sections();
  if (!validate_bonds(table, v)) return 1;
  Folds folds(kFolds);
  for (int f = 0; f < kFolds; ++f) {
    Table t = without_fold(table, folds, f);
    auto models = fit_models(t);
    if (!models.ok()) {
      fmt::print(stderr, "fold {}: {}\n", f, models.error().message);
      return 1;
    }
    t.models = std::move(models).value();
    const auto engine = Engine::from_table(std::move(t));
    const FoldView view{table, engine.value(), folds, f};
    judge_rates(view, v);
    judge_mixtures(view, v);
  }
  std::string text = fmt::format(
      "# Validation\n\nWritten by `halostep-tables validate`. Molecules are held out of every file of the table at once, in {} folds ({} for bonds); "
      "molecules with the same kinds of C-H site (homologues) share a fold. All models are fitted anew for each fold and asked "
      "through the engine. Table {}.\n\n", kFolds, kBondFolds, content_hash(table).substr(0, 16));
  nlohmann::json doc = {{"schema", "halostep.validation/1"}, {"folds", kFolds}, {"bond_folds", kBondFolds}, {"sections", nlohmann::json::array()}};
  judge_sources(table, v.sources);
  for (const auto* s : {&v.bonds, &v.halides, &v.sources, &v.rates, &v.mixtures}) {
    text += section_markdown(*s);
    doc["sections"].push_back(section_json(*s));
  }
  fmt::print("{}", text);
  return write(markdown, text) && write(json, doc.dump(1) + "\n") ? 0 : 1;
}

}  // namespace halostep
