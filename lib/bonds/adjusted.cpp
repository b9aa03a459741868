#include "adjusted.hpp"

#include <algorithm>
#include <cmath>
#include <map>

#include "signature.hpp"
#include "sources.hpp"

namespace halostep {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

// "[H]", "[Cl]": behind every bond, so not worth naming as a source of one. Elements neither.
bool elementary(const std::string& smiles) {
  return std::count_if(smiles.begin(), smiles.end(), [](char c) { return c >= 'A' && c <= 'Z'; }) == 1 && smiles.front() == '[' &&
         smiles.size() <= 4;
}

}  // namespace

void add_term(EnthalpySum& sum, int species, double factor) {
  const auto it = std::find_if(sum.begin(), sum.end(), [&](const EnthalpyTerm& t) { return t.species == species; });
  if (it == sum.end()) {
    sum.push_back({species, factor});
  } else if ((it->factor += factor) == 0) {
    sum.erase(it);
  }
}

void add_terms(EnthalpySum& sum, const EnthalpySum& more, double factor) {
  for (const auto& t : more) add_term(sum, t.species, factor * t.factor);
}

AdjustedBook::AdjustedBook(const Table& table) : table_(table), sources_(table.adjusted.size()) {
  for (std::size_t i = 0; i < table.adjusted.size(); ++i) {
    const auto& s = table.adjusted[i];
    at_.emplace(s.key, static_cast<int>(i));
    if (s.key == s.smiles) signatures_.insert(heavy_signature(s.smiles));
  }
  for (const auto& s : table.species) {
    if (s.at < 0) continue;
    for (const int row : s.rows) {
      const auto& r = table.species_rows[at(row)];
      if (!r.superseded && r.dfh298) add_source(sources_[at(s.at)], r.source);
    }
  }
  for (const auto& b : table.bonds) {
    if (b.at_radical < 0) continue;
    for (const int row : b.rows) {
      const auto& r = table.bond_rows[at(row)];
      if (!r.superseded) add_source(sources_[at(b.at_radical)], r.source);
    }
  }
}

int AdjustedBook::find(std::string_view key) const {
  const auto it = at_.find(key);
  return it == at_.end() ? -1 : it->second;
}

double AdjustedBook::covariance(int a, int b) const {
  if (a < b) std::swap(a, b);
  const auto& links = table_.adjusted[at(a)].links;
  const auto it = std::lower_bound(links.begin(), links.end(), b, [](const AdjustedLink& l, int o) { return l.other < o; });
  return it == links.end() || it->other != b ? 0.0 : it->covariance;
}

double AdjustedBook::covariance(const EnthalpySum& a, const EnthalpySum& b) const {
  double sum = 0;
  for (const auto& x : a) {
    for (const auto& y : b) sum += x.factor * y.factor * covariance(x.species, y.species);
  }
  return sum;
}

std::string AdjustedBook::missing(const EnthalpySum& sum) const {
  std::map<int, double> hanging;
  for (const auto& t : sum) {
    const auto& s = species(t.species);
    if (s.datum >= 0) hanging[s.datum] += t.factor * s.weight;
  }
  for (const auto& [datum, coefficient] : hanging) {
    if (std::abs(coefficient) > 1e-9) return species(datum).smiles;
  }
  return {};
}

std::optional<Quantity> AdjustedBook::value(const EnthalpySum& sum) const {
  if (!missing(sum).empty()) return std::nullopt;
  Quantity q;
  for (const auto& t : sum) q.value += t.factor * species(t.species).dfh298;
  q.u = std::sqrt(std::max(0.0, covariance(sum, sum)));
  return q;
}

std::vector<int> AdjustedBook::sources(const EnthalpySum& sum) const {
  std::vector<int> out;
  for (const auto& t : sum) {
    if (elementary(species(t.species).smiles)) continue;
    add_sources(out, sources(t.species));
  }
  return out;
}

}  // namespace halostep
