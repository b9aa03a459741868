#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "bonds/environment.hpp"
#include "bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

constexpr double kPerPrimary = 9.7e-12;  // Cl + C2H6 at 298 K (IUPAC, 5.8e-11) per H

std::string class_of(const Molecule& m, const std::string& carrier) {
  bool carbon_only = true, halogen = false, other = false, unsaturated = false;
  for (int i = 0; i < m.atom_count(); ++i) {
    const int z = m.atom(i).element;
    carbon_only = carbon_only && z == element::C;
    halogen = halogen || is_halogen(z);
    other = other || (z != element::C && !is_halogen(z));
  }
  for (int i = 0; i < m.bond_count(); ++i) unsaturated = unsaturated || m.bond(i).order != BondOrder::single;
  std::string name = "other organics";
  if (carbon_only && !unsaturated) name = m.atom_count() == 1 ? "methane" : "alkanes, cycloalkanes";
  else if (halogen && !other && !unsaturated) name = "haloalkanes";
  if (m.atom_count() == 3 && m.ring_count() == 1 && carbon_only) name = "cyclopropane";
  return carrier + " + " + name;
}

// The temperature at which a row judges, or 0 when it cannot.
double temperature_of(const RateRow& r) {
  if (r.carrier == "Cl" || r.carrier == "F") {
    const bool covers = !r.t_min || !r.t_max || (*r.t_min <= 310 && *r.t_max >= 285);
    return covers && (r.k298 || r.a) ? 298.15 : 0.0;
  }
  return r.a && r.t_min && r.t_max ? 0.5 * (*r.t_min + *r.t_max) : 0.0;
}

double rate_of(const RateRow& r, double t) {
  if (!r.a || !r.ea) return *r.k298;
  return *r.a * std::pow(t / 298.0, r.n) * std::exp(-*r.ea / (kGasConstant * t));
}

double naive_log_k(const std::vector<SiteOutcome>& sites, const Molecule& m) {
  double k = 0;
  for (const auto& s : sites) {
    const int carbons = m.degree(s.atom);
    k += s.h_count * kPerPrimary * (carbons <= 1 ? 1.0 : carbons == 2 ? 3.8 : 5.0);
  }
  return std::log10(k);
}

}  // namespace

void judge_rates(const FoldView& v, Validation& out) {
  for (const auto& r : v.full.rates) {
    if (r.superseded || r.carrier.empty() || v.folds.of(r.molecule) != v.fold) continue;
    const auto m = parse_smiles(r.molecule);
    const auto x = parse_halogen(r.carrier);
    const double t = temperature_of(r);
    if (!m.ok() || !x.ok() || t == 0) continue;
    auto& c = out.rates.classes[class_of(m.value(), r.carrier)];
    const Halogen one[] = {x.value()};
    const auto o = v.engine.outcome(m.value(), one, t);
    if (!o.ok()) {
      ++c.refused;
      continue;
    }
    std::vector<SiteOutcome> sites = o.value()[0].sites;
    if (r.radical != "total") {
      const auto radical = parse_smiles(r.radical, ParseMode::species);
      const int site = radical.ok() ? find_site(m.value(), symmetry_classes(m.value()), radical.value()) : -1;
      std::erase_if(sites, [&](const SiteOutcome& s) { return s.atom != site; });
    }
    if (sites.empty()) {
      ++c.refused;
      continue;
    }
    double k = 0, u = 0;
    bool marked = false;
    for (const auto& s : sites) {
      k += s.k_cm3_s;
      u = std::max(u, s.u_log10_k);
      marked = marked || s.extrapolated;
    }
    const double seen = std::log10(rate_of(r, t)), e = std::log10(k) - seen;
    const double naive = r.carrier == "Cl" ? naive_log_k(sites, m.value()) - seen : std::numeric_limits<double>::quiet_NaN();
    c.add(e, std::hypot(u, r.u_log10), naive);
    if (r.carrier == "Cl") out.rates.classes["Cl + all"].add(e, std::hypot(u, r.u_log10), naive);
    out.rates.row(e, fmt::format("{} + {} ({}) at {:.0f} K: {:.2e}, row {:.2e} cm3/s{}", r.carrier, r.molecule, r.radical, t, k,
                                 rate_of(r, t), marked ? " (marked extrapolated)" : ""));
  }
}

}  // namespace halostep
