#include "tables/validate.hpp"

#include <fmt/format.h>

#include <fstream>
#include <nlohmann/json.hpp>

#include "tables/fit.hpp"
#include "tables/table_io.hpp"

namespace halostep {
namespace {

constexpr int kFolds = 10;

Validation sections() {
  Validation v;
  v.bonds = {"bonds", "D(C-H), typed", "kJ/mol", "median of the class over the molecules that are not held out",
             "Every C-H bond of the table whose molecule is held out, against its combined value; the answer is typed.", 1, {}, {}};
  v.halides = {"halides", "D(R-X)", "kJ/mol", "median over the halides of that halogen that are not held out",
               "Every C-X bond of the table whose halide is held out; D(R-X) from D(R-H) and the exchange model.", 1, {}, {}};
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

}  // namespace

int validate(const Table& table, const std::string& markdown, const std::string& json) {
  Folds folds(kFolds);
  auto v = sections();
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
    judge_bonds(view, v);
    judge_rates(view, v);
    judge_mixtures(view, v);
  }
  std::string text = fmt::format(
      "# Validation\n\nWritten by `halostep-tables validate`. Molecules are held out of every file of the table at once, in {} folds; "
      "molecules with the same kinds of C-H site (homologues) share a fold. All models are fitted anew for each fold and asked "
      "through the engine. Table {}.\n\n", kFolds, content_hash(table).substr(0, 16));
  nlohmann::json doc = {{"schema", "halostep.validation/1"}, {"folds", kFolds}, {"sections", nlohmann::json::array()}};
  for (const auto* s : {&v.bonds, &v.halides, &v.rates, &v.mixtures}) {
    text += section_markdown(*s);
    doc["sections"].push_back(section_json(*s));
  }
  fmt::print("{}", text);
  return write(markdown, text) && write(json, doc.dump(1) + "\n") ? 0 : 1;
}

}  // namespace halostep
