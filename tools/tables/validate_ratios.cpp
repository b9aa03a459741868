// Relative rates of two sites, and activation energies of the reverse step.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <optional>

#include "bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

constexpr double kTold = 1.5;  // ratios nearer to 1 order no pair

std::optional<SiteOutcome> site_of(const Engine& engine, const std::string& smiles, const std::string& radical,
                                   Halogen x, double t) {
  const auto m = parse_smiles(smiles);
  const auto r = parse_smiles(radical, ParseMode::species);
  if (!m.ok() || !r.ok()) return std::nullopt;
  const Halogen one[] = {x};
  const auto o = engine.outcome(m.value(), one, t);
  const int atom = find_site(m.value(), symmetry_classes(m.value()), r.value());
  if (!o.ok()) return std::nullopt;
  for (const auto& s : o.value()[0].sites) {
    if (s.atom == atom) return s;
  }
  return std::nullopt;
}

bool hydrocarbon(const std::string& smiles) {
  return smiles.find_first_not_of("CHch0123456789()[]=#@/\\") == std::string::npos;
}

std::optional<Halogen> carrier_of(const std::string& reagent) {
  for (const char* x : {"F", "Cl", "Br", "I"}) {
    if (reagent == std::string(x) + "2") return parse_halogen(x).value();
  }
  return std::nullopt;
}

double textbook(const std::string& smiles, const std::string& radical, Halogen x) {
  const auto m = parse_smiles(smiles);
  const auto r = parse_smiles(radical, ParseMode::species);
  const int atom = m.ok() && r.ok() ? find_site(m.value(), symmetry_classes(m.value()), r.value()) : -1;
  if (atom < 0) return std::nan("");
  int carbons = 0;
  for (const auto& b : m.value().neighbours(atom)) carbons += m.value().atom(b.atom).element == element::C;
  constexpr double kCl[] = {1, 3.8, 5}, kBr[] = {1, 82, 1600}, kF[] = {1, 1.2, 1.4};
  const int k = std::clamp(carbons, 1, 3) - 1;
  return x == Halogen::Cl ? kCl[k] : x == Halogen::F ? kF[k] : kBr[k];
}

void judge_row(const FoldView& v, const RelativeRateRow& r, Halogen x, Validation& out) {
  const bool inert = r.medium == "gas" || r.medium == "neat" || r.medium == "CCl4";
  const bool plain = hydrocarbon(r.molecule) && hydrocarbon(r.reference_molecule);
  const auto name = fmt::format("{} {}", r.reagent,
                                !inert      ? "in complexing solvents"
                                : !r.fitted ? "set aside in the table"
                                : plain     ? "hydrocarbons"
                                            : "polar substrates");
  const auto a = site_of(v.engine, r.molecule, r.radical, x, r.t),
             b = site_of(v.engine, r.reference_molecule, r.reference_radical, x, r.t);
  auto& c = out.ratios.classes[name];
  if (!a || !b) {
    ++c.refused;
    return;
  }
  const double found = std::log10(a->k_cm3_s / a->h_count / (b->k_cm3_s / b->h_count)), seen = std::log10(r.ratio);
  const double naive =
      std::log10(textbook(r.molecule, r.radical, x) / textbook(r.reference_molecule, r.reference_radical, x));
  c.add(found - seen, naive - seen);
  if (!inert || !r.fitted) return;
  if (std::abs(seen) > std::log10(kTold)) out.ranges[r.reagent].push_back(found * seen > 0);
  out.ratios.row(found - seen, fmt::format("{} {} {} over {} {} at {:.0f} K, {}: {:.2f}, row {:.2f}", r.reagent,
                                           r.molecule, r.radical, r.reference_molecule, r.reference_radical, r.t,
                                           r.medium, std::pow(10, found), r.ratio));
}

// Two measured site rates of one molecule by one source.
void judge_pairs(const FoldView& v, Validation& out) {
  const auto usable = [&](const RateRow& r) {
    return !r.superseded && r.fitted && !r.carrier.empty() && r.radical != "total" && r.k298 &&
           v.folds.of(r.molecule) == v.fold;
  };
  for (std::size_t i = 0; i < v.full.rates.size(); ++i) {
    for (std::size_t k = i + 1; k < v.full.rates.size(); ++k) {
      const auto &p = v.full.rates[i], &q = v.full.rates[k];
      if (!usable(p) || !usable(q) || p.carrier != q.carrier || p.molecule != q.molecule || p.source != q.source ||
          p.radical == q.radical)
        continue;
      const auto x = parse_halogen(p.carrier);
      const auto a = site_of(v.engine, p.molecule, p.radical, x.value(), kReferenceTemperature);
      const auto b = site_of(v.engine, q.molecule, q.radical, x.value(), kReferenceTemperature);
      if (!a || !b) continue;
      const double seen = std::log10(*p.k298 / a->h_count / (*q.k298 / b->h_count));
      if (std::abs(seen) > std::log10(kTold))
        out.ranges[p.carrier + "2"].push_back(std::log10(a->k_cm3_s / a->h_count / (b->k_cm3_s / b->h_count)) * seen >
                                              0);
    }
  }
}

struct Reverse {
  std::string parent, radical;
  Halogen x = Halogen::Cl;
};

// R.HX>>RH.X as the forward step it undoes.
std::optional<Reverse> as_reverse(const std::string& reaction) {
  const auto arrow = reaction.find(">>"), dot = reaction.find('.');
  if (arrow == std::string::npos || dot == std::string::npos || dot > arrow) return std::nullopt;
  const auto hx = reaction.substr(dot + 1, arrow - dot - 1), right = reaction.substr(arrow + 2);
  const auto x = parse_halogen(hx);
  const auto last = right.rfind('.');
  if (!x.ok() || last == std::string::npos) return std::nullopt;
  return Reverse{right.substr(0, last), reaction.substr(0, dot), x.value()};
}

constexpr double kUsual = 400;  // K, where a row states no range

}  // namespace

void judge_ratios(const FoldView& v, Validation& out) {
  for (const auto& r : v.full.relative_rates) {
    const auto x = carrier_of(r.reagent);
    const bool self = r.molecule == r.reference_molecule && r.radical == r.reference_radical;
    if (r.superseded || !x || self || !(r.ratio > 0) || v.folds.of(r.molecule) != v.fold) continue;
    judge_row(v, r, *x, out);
  }
  judge_pairs(v, out);
}

void judge_reverse(const FoldView& v, const Engine& whole, Validation& out) {
  for (const auto& r : v.full.rates) {
    if (r.superseded || r.type != "reverse-abstraction" || !r.ea) continue;
    const auto f = as_reverse(r.reaction);
    if (!f || v.folds.of(f->parent) != v.fold) continue;
    const double t = r.t_min && r.t_max ? 0.5 * (*r.t_min + *r.t_max) : kUsual;
    for (const bool held : {true, false}) {
      auto& c =
          out.reverse.classes[fmt::format("R + H{}{}", halogen_name(f->x), held ? "" : ", molecule not held out")];
      const auto s = site_of(held ? v.engine : whole, f->parent, f->radical, f->x, t);
      if (!s) {
        ++c.refused;
        continue;
      }
      const auto step = whole.reaction(fmt::format("[{0}].{1}>>{0}.{2}", halogen_name(f->x), f->parent, f->radical), t);
      const double change = step.ok() && step.value().dg && step.value().ds && step.value().dh
                                ? step.value().dg->value + t * step.value().ds->value / 1000 - step.value().dh->value
                                : 0.0;
      const double found = s->ea - s->dh.value - change;
      c.add(found - *r.ea, std::nan(""));
      if (held)
        out.reverse.row(found - *r.ea,
                        fmt::format("{} at {:.0f} K: {:.1f}, row {:.1f} kJ/mol", r.reaction, t, found, *r.ea));
    }
  }
}

}  // namespace halostep
