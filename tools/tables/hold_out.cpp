#include "tables/hold_out.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <set>

#include "bonds/features.hpp"
#include "bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "tables/adjust_table.hpp"

namespace halostep {
namespace {

// Equal for homologues: chains that only repeat a kind of site.
std::string family(const Molecule& m) {
  const auto info = environment(m);
  std::set<std::string> kinds;
  for (const auto& s : hydrogen_sites(m, symmetry_classes(m))) {
    std::string text = element_symbol(m.atom(s.atom).element);
    for (const auto& f : site_features(m, info, s.atom).features) text += fmt::format(" {}:{}", f.feature, f.count);
    kinds.insert(std::move(text));
  }
  return kinds.empty() ? canonical_smiles(m, false) : fmt::format("{}", fmt::join(kinds, "|"));
}

// FNV-1a (Fowler, Noll, Vo): the same on every machine, unlike std::hash.
std::uint64_t hash_of(const std::string& text) {
  std::uint64_t h = 14695981039346656037ULL;
  for (const char c : text) h = (h ^ static_cast<unsigned char>(c)) * 1099511628211ULL;
  return h;
}

}  // namespace

Folds::Folds(const std::vector<std::string>& molecules) : count_(static_cast<int>(molecules.size())), alone_(true) {
  for (const auto& m : molecules) known_.emplace(m, static_cast<int>(known_.size()));
}

int Folds::of(const std::string& smiles) {
  if (const auto it = known_.find(smiles); it != known_.end()) return it->second;
  if (alone_) return -1;
  const auto m = parse_smiles(smiles, ParseMode::species);
  const int fold = m.ok() ? static_cast<int>(hash_of(family(m.value())) % static_cast<std::uint64_t>(count_)) : -1;
  known_.emplace(smiles, fold);
  return fold;
}

Table without_fold(const Table& table, Folds& folds, int fold) {
  Table t = table;
  t.models.clear();
  const auto held = [&](const std::string& smiles) {
    const auto m = parse_smiles(smiles, ParseMode::species);
    const bool organic = m.ok() && m.value().unpaired() == 0 && smiles.find_first_of("Cc") != std::string::npos && smiles != "Cl" && smiles != "ClCl";
    return organic && folds.of(smiles) == fold;
  };
  std::erase_if(t.bonds, [&](const BondEntry& b) { return held(b.molecule); });
  std::erase_if(t.species, [&](const SpeciesEntry& s) { return held(s.smiles); });
  std::erase_if(t.rates, [&](const RateRow& r) { return !r.carrier.empty() && held(r.molecule); });
  std::erase_if(t.relative_rates, [&](const RelativeRateRow& r) { return held(r.molecule) || held(r.reference_molecule); });
  std::erase_if(t.mixtures, [&](const MixtureRow& r) { return held(r.molecule); });
  // What tells of a held molecule through others must go too: its bonds' rows are gone from the entries, so from here.
  if (adjust_table(t)) t.adjusted.clear();
  return t;
}

}  // namespace halostep
