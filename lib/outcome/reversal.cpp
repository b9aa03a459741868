#include "outcome/reversal.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <optional>

#include "halostep/structure.hpp"

namespace halostep {
namespace {

const double kLn10 = std::log(10.0);
// Decades a class value may be off for a radical without rows (the alkyl rows of one halogen spread by 0.2 to 0.4), and
// bromine's rows for iodine.
constexpr double kClassU = 0.3, kIodineU = 0.5;
constexpr double kGroupU =
    0.5;  // more decades where the centre carries a polar group: CF3 + Br2 is 20 times slower than CH3
constexpr double kEntropyU = 5.0;  // J mol-1 K-1, class value for a site without entropies

double ln_rate(const RateRow& r, double t) {
  if (!r.a || !r.ea) return std::log(*r.k298);
  return std::log(*r.a) + r.n * std::log(t / 298.0) - *r.ea / (kGasConstant * t);
}

int halogen_molecule(const Molecule& m) {
  if (m.atom_count() != 2 || m.atom(0).element != m.atom(1).element) return -1;
  for (const auto x : kAllHalogens) {
    if (m.atom(0).element == halogen_element(x)) return static_cast<int>(x);
  }
  return -1;
}

// The atom with the odd electron, or -1.
int radical_atom(const Molecule& m) {
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).unpaired == 1) return i;
  }
  return -1;
}

bool is_conjugated(const RateSite& s) { return s.a_class == AClass::benzylic || s.a_class == AClass::allylic; }

bool carries_group(const RateSite& s) {
  return std::any_of(s.count.begin(), s.count.end(), [](const auto& by_distance) { return by_distance[0] > 0; });
}

int carbons_of(const RateSite& s) { return std::min(s.carbons, 3); }

}  // namespace

Result<double> hx_per_x2(double conversion, double halogen_ratio) {
  if (!(conversion >= 0 && conversion <= 1)) {
    return Error{ErrorClass::usage, fmt::format("a conversion of {} is outside 0 to 1", format_fixed(conversion, 3)),
                 "conversion"};
  }
  if (!(halogen_ratio > 0) || !std::isfinite(halogen_ratio)) {
    return Error{ErrorClass::usage, "X2 per substrate at the start must be positive", "halogen ratio"};
  }
  if (conversion >= halogen_ratio) {
    return Error{ErrorClass::usage,
                 fmt::format("{} X2 per substrate are gone before a conversion of {}", format_fixed(halogen_ratio, 3),
                             format_fixed(conversion, 3)),
                 "conversion"};
  }
  return conversion / (halogen_ratio - conversion);
}

void TransferBook::read() const {
  for (std::size_t i = 0; i < table_.rates.size(); ++i) {
    const auto& r = table_.rates[i];
    if (r.superseded || r.type != "halogen-transfer" || (!r.k298 && !(r.a && r.ea))) continue;
    const auto parsed = parse_reaction(r.reaction);
    if (!parsed.ok() || parsed.value().left.size() != 2) continue;
    const auto& left = parsed.value().left;
    const std::size_t other = halogen_molecule(left[0]) >= 0 ? 1 : 0;
    const int x = halogen_molecule(left[1 - other]), at = radical_atom(left[other]);
    if (x < 0 || at < 0 || left[other].atom(at).element != element::C) continue;
    Known k{x, static_cast<int>(i), 0, false, canonical_smiles(left[other], false)};
    // Only centres that carry nothing but carbon and hydrogen speak for a class.
    for (const auto& n : left[other].neighbours(at)) {
      const bool carbon = left[other].atom(n.atom).element == element::C;
      k.carbons = carbon && k.carbons >= 0 && left[other].bond(n.bond).order == BondOrder::single ? k.carbons + 1 : -1;
      if (!carbon) break;
      for (const auto& q : left[other].neighbours(n.atom))
        k.conjugated = k.conjugated || left[other].bond(q.bond).order != BondOrder::single;
    }
    known_.push_back(std::move(k));
  }
}

std::optional<LnRate> TransferBook::of_class(int x, const RateSite& site, double temperature) const {
  // The class itself, else any conjugated or plain alkyl radical.
  for (const bool exact : {true, false}) {
    double sum = 0, squares = 0;
    int n = 0;
    for (const auto& k : known_) {
      if (k.x != x || k.carbons < 0 || k.conjugated != is_conjugated(site) || (exact && k.carbons != carbons_of(site)))
        continue;
      const double v = ln_rate(table_.rates[static_cast<std::size_t>(k.row)], temperature);
      sum += v;
      squares += v * v;
      ++n;
    }
    if (n == 0) continue;
    const double mean = sum / n, spread = std::max(0.0, squares / n - mean * mean);
    const double group = !is_conjugated(site) && carries_group(site) ? kGroupU : 0.0;
    return LnRate{mean, std::hypot(kClassU * kLn10, group * kLn10, std::sqrt(spread)), false};
  }
  return std::nullopt;
}

std::optional<LnRate> TransferBook::rate(int x, const std::string& radical, const RateSite& site,
                                         double temperature) const {
  std::call_once(once_, [this] { read(); });
  double sum = 0, weights = 0;
  for (const auto& k : known_) {
    if (k.x != x || k.radical != radical) continue;
    const auto& r = table_.rates[static_cast<std::size_t>(k.row)];
    const double w = 1 / (r.u_log10 * r.u_log10);
    sum += w * ln_rate(r, temperature);
    weights += w;
  }
  if (weights > 0) return LnRate{sum / weights, kLn10 / std::sqrt(weights), true};
  if (auto own = of_class(x, site, temperature)) return own;
  constexpr int kBromine = static_cast<int>(Halogen::Br), kIodine = static_cast<int>(Halogen::I);
  if (x != kIodine) return std::nullopt;
  auto like = of_class(kBromine, site, temperature);
  if (like) like->u = std::hypot(like->u, kIodineU * kLn10);
  return like;
}

RadicalEntropy::RadicalEntropy(const ThermoBook& thermo) : thermo_(thermo) {
  double n = 0, sx = 0, sy = 0, sxx = 0, sxy = 0;
  double carbons = 0;
  for (const char* parent : {"C", "CC", "CCC", "CC(C)C"}) {
    const auto m = parse_smiles(parent);
    if (!m.ok()) continue;
    // The site with most carbons.
    const auto sites = hydrogen_sites(m.value(), symmetry_classes(m.value()));
    for (const auto& s : sites) {
      if (m.value().degree(s.atom) != static_cast<int>(carbons)) continue;
      const auto v = known(m.value(), s);
      if (!v) continue;
      n += 1;
      sx += carbons;
      sy += *v;
      sxx += carbons * carbons;
      sxy += carbons * *v;
    }
    carbons += 1;
  }
  points_ = static_cast<int>(n);
  if (n < 2) return;
  per_carbon_ = (n * sxy - sx * sy) / (n * sxx - sx * sx);
  at_none_ = (sy - per_carbon_ * sx) / n;
}

std::optional<double> RadicalEntropy::known(const Molecule& m, const HydrogenSite& site) const {
  const auto radical = m.without_hydrogen(site.atom);
  const auto *rh = thermo_.find(canonical_smiles(m, false)),
             *r = thermo_.find_radical(radical, canonical_smiles(radical, false));
  if (rh == nullptr || r == nullptr || !rh->s298 || !r->s298) return std::nullopt;
  return *r->s298 - *rh->s298 - 1000 * kGasConstant * std::log(static_cast<double>(site.h_count));
}

std::optional<Quantity> RadicalEntropy::of(const Analysis& a, const CarbonSite& site, const RateSite& rate) const {
  if (a.deuterium_count() == 0) {
    if (const auto v = known(a.original(), *site.site)) return Quantity{*v, 2.0};
  }
  if (points_ < 2) return std::nullopt;
  return Quantity{at_none_ + per_carbon_ * carbons_of(rate), kEntropyU};
}

void add_reversal(ShareFactors& f, const Analysis& a, const CarbonSites& s, const KindRates& free,
                  const ReversalBook& book, const HalogenData& h, int x, double per_x2, double temperature,
                  std::string& why) {
  if (!(per_x2 > 0)) return;
  const double rt = kGasConstant * temperature;
  ShareFactors out = f;
  std::vector<bool> done(s.kinds.size(), false);
  for (const auto& site : s.sites) {
    if (site.kind < 0 || done[static_cast<std::size_t>(site.kind)]) continue;
    const auto k = static_cast<std::size_t>(site.kind);
    done[k] = true;
    const auto& kind = s.kinds[k];
    const auto radical = canonical_smiles(a.original().without_hydrogen(site.site->atom), false);
    const auto transfer = book.transfer.rate(x, radical, kind.rate, temperature);
    const auto entropy = book.entropy.of(a, site, kind.rate);
    if (!transfer)
      why = fmt::format("the table has no rate of radicals with {}", x == 0   ? "F2"
                                                                     : x == 1 ? "Cl2"
                                                                     : x == 2 ? "Br2"
                                                                              : "I2");
    else if (!entropy || h.atom == nullptr || h.hydride == nullptr || !h.atom->s298 || !h.hydride->s298)
      why = "the table lacks entropies of the abstraction";
    if (!why.empty()) return;
    // Detailed balance for one H: k(R + HX) = k(X + RH)/K.
    const double ds = entropy->value + *h.hydride->s298 - *h.atom->s298;
    const double ln_k_eq = ds / (1000 * kGasConstant) - (kind.d.value - h.d_hx->value) / rt;
    const double back = free.at[k].ln_k + std::log(free.damping) - ln_k_eq;
    const double ratio = per_x2 * std::exp(back - transfer->value), gone = ratio / (1 + ratio);
    auto& w = out.kinds[k];
    w.forward = 1 / (1 + ratio);
    w.reversal = -std::log1p(ratio);
    w.own += gone * gone * (transfer->u * transfer->u + std::pow(entropy->u / (1000 * kGasConstant), 2));
    // d ln(1/(1+ratio)) = -gone d ln ratio, and ln ratio holds ln k and, through K, (D(R-H) - D(H-X))/RT.
    w.gradient = weighted_sum(w.gradient, 1, free.gradient[k], -gone);
    w.gradient.dh -= gone / rt;
  }
  f = std::move(out);
}

}  // namespace halostep
