#include "evidence.hpp"

#include <algorithm>
#include <cmath>

#include "halostep/structure.hpp"
#include "locate.hpp"
#include "sources.hpp"

namespace halostep {
namespace {

// Bonds shown as evidence for one typed answer.
constexpr std::size_t kShown = 3;
constexpr int kHalogens[] = {9, 17, 35, 53};

// Tanimoto coefficient of two counted feature sets.
double similarity(const std::vector<FeatureCount>& a, const std::vector<FeatureCount>& b) {
  double both = 0, all = 0;
  std::size_t i = 0, k = 0;
  while (i < a.size() || k < b.size()) {
    if (k == b.size() || (i < a.size() && a[i].feature < b[k].feature)) all += std::abs(a[i++].count);
    else if (i == a.size() || b[k].feature < a[i].feature) all += std::abs(b[k++].count);
    else {
      both += std::min(std::abs(a[i].count), std::abs(b[k].count));
      all += std::max(std::abs(a[i++].count), std::abs(b[k++].count));
    }
  }
  return all > 0 ? both / all : 0;
}

template <class Rows>
std::vector<int> current_sources(const std::vector<int>& members, const Rows& rows) {
  std::vector<int> out;
  for (const int row : members) {
    const auto& r = rows[static_cast<std::size_t>(row)];
    if (!r.superseded) add_source(out, r.source);
  }
  return out;
}

}  // namespace

std::vector<int> Evidence::nearest(const std::vector<Known>& known, const std::vector<FeatureCount>& f) {
  std::vector<std::pair<double, std::size_t>> order;
  for (std::size_t i = 0; i < known.size(); ++i) {
    if (const double s = similarity(known[i].features, f); s > 0) order.emplace_back(-s, i);
  }
  std::sort(order.begin(), order.end());
  std::vector<int> out;
  for (std::size_t i = 0; i < std::min(kShown, order.size()); ++i) {
    add_sources(out, known[order[i].second].sources);
  }
  return out;
}

void Evidence::read_hydrogen() const {
  for (const auto& b : table_.bonds) {
    if (b.leaving != "[H]") continue;
    const auto m = parse_smiles(b.molecule, ParseMode::species), r = parse_smiles(b.radical, ParseMode::species);
    if (!m.ok() || !r.ok()) continue;
    const int atom = find_site(m.value(), symmetry_classes(m.value()), r.value());
    if (atom < 0) continue;
    auto f = site_features(m.value(), environment(m.value()), atom);
    if (f.not_covered == nullptr) hydrogen_.push_back({std::move(f.features), current_sources(b.rows, table_.bond_rows)});
  }
}

void Evidence::read_exchange() const {
  for (const auto& s : table_.species) {
    if (s.phase != "g" || !s.dfh298) continue;
    const auto m = parse_smiles(s.smiles, ParseMode::species);
    if (!m.ok() || m.value().unpaired() != 0) continue;
    const auto info = environment(m.value());
    for (int i = 0; i < m.value().atom_count(); ++i) {
      const auto* x = std::find(std::begin(kHalogens), std::end(kHalogens), m.value().atom(i).element);
      if (x == std::end(kHalogens) || m.value().degree(i) != 1) continue;
      const int carbon = m.value().neighbours(i)[0].atom;
      if (m.value().atom(carbon).element != element::C) continue;
      exchange_[x - std::begin(kHalogens)].push_back(
          {exchange_features(m.value(), info, carbon), current_sources(s.rows, table_.species_rows)});
      break;
    }
  }
}

std::vector<int> Evidence::hydrogen(const std::vector<FeatureCount>& f) const {
  std::call_once(hydrogen_once_, [this] { read_hydrogen(); });
  return nearest(hydrogen_, f);
}

std::vector<int> Evidence::exchange(int x, const std::vector<FeatureCount>& f) const {
  std::call_once(exchange_once_, [this] { read_exchange(); });
  return nearest(exchange_[x], f);
}

}  // namespace halostep
