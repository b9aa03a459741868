// Mixtures judged with the molecule alone held out, beside the figures with all its kin held out.
#include <fmt/format.h>

#include <set>

#include "tables/fit.hpp"
#include "tables/validate.hpp"

namespace halostep {

bool judge_alone_mixtures(const Table& table, Validation& out) {
  std::set<std::string> molecules;
  for (const auto& r : table.mixtures) {
    if (!r.superseded && carrier_of(r.reagent) && not_measured(r) == nullptr &&
        r.medium.find(" M") == std::string::npos)
      molecules.insert(r.molecule);
  }
  Folds folds(std::vector<std::string>(molecules.begin(), molecules.end()));
  Validation alone;
  for (int f = 0; f < folds.count(); ++f) {
    Table t = without_fold(table, folds, f);
    auto models = fit_models(t);
    if (!models.ok()) {
      fmt::print(stderr, "alone {}: {}\n", f, models.error().message);
      return false;
    }
    t.models = std::move(models).value();
    const auto engine = Engine::from_table(std::move(t));
    judge_mixtures({table, engine.value(), folds, f}, alone);
  }
  for (auto& [name, score] : alone.mixtures.classes)
    out.mixtures.classes[name + "; molecule alone out"] = std::move(score);
  return true;
}

}  // namespace halostep
