// Mixtures judged with the molecule alone held out, beside the figures with all its kin held out.
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
  Validation alone;
  const Folds each(std::vector<std::string>(molecules.begin(), molecules.end()));
  if (!each_fold(table, each, fit_models, [&](const FoldView& view) { judge_mixtures(view, alone); })) return false;
  for (auto& [name, score] : alone.mixtures.classes)
    out.mixtures.classes[name + "; molecule alone out"] = std::move(score);
  return true;
}

}  // namespace halostep
