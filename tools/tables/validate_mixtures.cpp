#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <map>
#include <tuple>

#include "halostep/structure.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

// Compositions that were not measured as such say so in their notes.
constexpr const char* kNotMeasured[] = {"calculated", "from per-H", "evaluated from", "from RS", "quoted", "textbook figure", "a limit", "claim", "process yield"};

bool measured(const MixtureRow& r) {
  return std::none_of(std::begin(kNotMeasured), std::end(kNotMeasured), [&](const char* w) { return r.note.find(w) != std::string::npos; });
}

std::optional<Halogen> carrier(const std::string& reagent) {
  if (reagent == "Cl2" || reagent == "SO2Cl2") return Halogen::Cl;
  if (reagent == "Br2") return Halogen::Br;
  if (reagent == "F2") return Halogen::F;
  return std::nullopt;
}

double per_h(Halogen x, int carbons) {
  const int k = std::clamp(carbons, 1, 3) - 1;
  constexpr double kCl[] = {1, 3.8, 5}, kBr[] = {1, 82, 1600}, kF[] = {1, 1.2, 1.4};
  return x == Halogen::Cl ? kCl[k] : x == Halogen::Br ? kBr[k] : kF[k];
}

int carbon_neighbours(const Molecule& m, int atom) {
  int n = 0;
  for (const auto& b : m.neighbours(atom)) n += m.atom(b.atom).element == element::C;
  return n;
}

struct Shares {
  std::vector<double> seen, engine, naive, low, high;
};

void normalise(std::vector<double>& v) {
  double sum = 0;
  for (const double x : v) sum += x;
  for (auto& x : v) x /= sum;
}

double mean_error(const std::vector<double>& a, const std::vector<double>& b) {
  double sum = 0;
  for (std::size_t i = 0; i < a.size(); ++i) sum += std::abs(a[i] - b[i]);
  return sum / static_cast<double>(a.size());
}

}  // namespace

void judge_mixtures(const FoldView& v, Validation& out) {
  std::map<std::tuple<std::string, std::string, double, std::string, int>, std::vector<const MixtureRow*>> groups;
  for (const auto& r : v.full.mixtures) {
    if (!r.superseded && measured(r) && v.folds.of(r.molecule) == v.fold) groups[{r.reagent, r.molecule, r.t, r.medium, r.source}].push_back(&r);
  }
  for (const auto& [key, rows] : groups) {
    const auto& r = *rows.front();
    const auto x = carrier(r.reagent);
    const auto m = parse_smiles(r.molecule);
    if (!x || !m.ok() || rows.size() < 2) continue;
    const bool alkane = formula(m.value()).find_first_not_of("CH0123456789") == std::string::npos;
    auto& c = out.mixtures.classes[fmt::format("{} + {}", r.reagent, alkane ? "hydrocarbons" : "substituted")];
    const Halogen one[] = {*x};
    const auto o = v.engine.outcome(m.value(), one, r.t);
    Shares s;
    for (const auto* row : rows) {
      const auto product = parse_smiles(row->product);
      if (!o.ok() || !product.ok()) break;
      const auto wanted = canonical_smiles(product.value(), false);
      for (const auto& site : o.value()[0].sites) {
        if (canonical_smiles(m.value().with_substituent(site.atom, halogen_element(*x)), false) != wanted) continue;
        s.seen.push_back(row->fraction);
        s.engine.push_back(site.share);
        s.low.push_back(site.share_low);
        s.high.push_back(site.share_high);
        s.naive.push_back(site.h_count * per_h(*x, carbon_neighbours(m.value(), site.atom)));
        break;
      }
    }
    if (s.seen.size() != rows.size()) {
      ++c.refused;
      continue;
    }
    normalise(s.seen);
    normalise(s.engine);
    normalise(s.naive);
    const double e = mean_error(s.engine, s.seen);
    c.add(e, mean_error(s.naive, s.seen));
    std::string text;
    for (std::size_t i = 0; i < s.seen.size(); ++i) {
      ++c.with_u;
      c.within += s.seen[i] >= s.low[i] && s.seen[i] <= s.high[i];
      text += fmt::format("{}{} {:.2f} (seen {:.2f})", i ? ", " : "", rows[i]->product, s.engine[i], s.seen[i]);
    }
    out.mixtures.row(e, fmt::format("{} + {} at {:.0f} K, {}: {}", r.reagent, r.molecule, r.t, r.medium, text));
  }
}

}  // namespace halostep
