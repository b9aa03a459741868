#include "bond_model.hpp"

#include <fmt/format.h>

#include <cmath>

#include "signature.hpp"

namespace halostep {
namespace {

std::string entry_key(std::string_view molecule, std::string_view radical, std::string_view leaving) {
  std::string k;
  k.reserve(molecule.size() + radical.size() + leaving.size() + 2);
  k.append(molecule).append(1, '>').append(radical).append(1, '.').append(leaving);
  return k;
}

}  // namespace

const FittedModel* find_model(const std::vector<FittedModel>& models, std::string_view name) {
  for (const auto& m : models) {
    if (m.name == name) return &m;
  }
  return nullptr;
}

LinearModel LinearModel::from(const FittedModel* m) {
  LinearModel out;
  if (m == nullptr) return out;
  out.value = m->values;
  out.support = m->support;
  out.covariance = m->covariance;
  for (const auto& [name, v] : m->settings) {
    if (name == "scatter") out.scatter = v;
  }
  return out;
}

double LinearModel::covariance_of(const std::vector<FeatureCount>& x, const std::vector<FeatureCount>& y) const {
  const std::size_t n = value.size();
  double sum = 0;
  for (const auto& a : x) {
    const double* row = covariance.data() + static_cast<std::size_t>(a.feature) * n;
    for (const auto& b : y) sum += a.count * b.count * row[b.feature];
  }
  return sum;
}

Quantity LinearModel::predict(const std::vector<FeatureCount>& x, double share) const {
  Quantity q;
  for (const auto& f : x) q.value += f.count * value[static_cast<std::size_t>(f.feature)];
  q.u = std::sqrt(std::max(0.0, covariance_of(x, x)) + share * share * scatter * scatter);
  return q;
}

BondModel::BondModel(const Table& table, const FittedModel* bonds, std::span<const FittedModel* const> exchange)
    : bonds_(LinearModel::from(bonds)) {
  for (const auto* m : exchange) exchange_.push_back(LinearModel::from(m));
  exchange_.resize(4);
  for (std::size_t i = 0; i < table.bonds.size(); ++i) {
    const auto& b = table.bonds[i];
    entries_.emplace(entry_key(b.molecule, b.radical, b.leaving), static_cast<int>(i));
    // A broken bond may be asked for from either side.
    if (b.leaving != "[H]") entries_.emplace(entry_key(b.molecule, b.leaving, b.radical), static_cast<int>(i));
    molecules_.insert(b.molecule);
    signatures_.insert(heavy_signature(b.molecule));
  }
}

int BondModel::measured(std::string_view molecule, std::string_view radical, std::string_view leaving) const {
  const auto it = entries_.find(entry_key(molecule, radical, leaving));
  return it == entries_.end() ? -1 : it->second;
}

TypedBond BondModel::typed(const SiteFeatures& f) const {
  TypedBond t;
  if (f.not_covered != nullptr) {
    t.refusal = fmt::format("not covered by the typed model: {}", f.not_covered);
    return t;
  }
  if (bonds_.empty()) {
    t.refusal = "the table holds no fitted bond model";
    return t;
  }
  for (const auto& c : f.features) {
    const int support = bonds_.support[static_cast<std::size_t>(c.feature)];
    // A pair or remote effect without evidence only widens u; a base or a substituent without evidence is a refusal.
    if (support == 0 && feature_prior(c.feature) > 20.0) {
      t.refusal = fmt::format("not covered by the typed model: no evidence for '{}'",
                              feature_names()[static_cast<std::size_t>(c.feature)]);
      return t;
    }
    if (support < kThinSupport) t.extrapolated = true;
  }
  t.d = bonds_.predict(f.features, scatter_share(f.features));
  if (t.d.u > 2.0 * bonds_.scatter) t.extrapolated = true;
  if (t.d.u > kTypedLimit) t.refusal = fmt::format("typed value {:.0f} with u = {:.0f} kJ/mol is too uncertain to give", t.d.value, t.d.u);
  return t;
}

Quantity BondModel::exchange(int x, const std::vector<FeatureCount>& f) const {
  const auto& m = exchange_[static_cast<std::size_t>(x)];
  return m.empty() ? Quantity{} : m.predict(f);
}

}  // namespace halostep
