// Pairs of measured site rates, and activation energies of the reverse step.
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

void judge_reverse(const FoldView& v, const Engine& whole, Validation& out) {
  judge_pairs(v, out);
  for (const auto& r : v.full.rates) {
    if (r.superseded || r.type != "reverse-abstraction" || !r.ea) continue;
    const auto f = as_reverse(r.reaction);
    if (!f || v.folds.of(f->parent) != v.fold) continue;
    const double t = r.t_min && r.t_max ? 0.5 * (*r.t_min + *r.t_max) : kUsual;
    for (const bool held : {true, false}) {
      auto& c =
          out.reverse.classes[fmt::format("R + H{}{}", halogen_name(f->x), held ? "" : ", molecule not held out")];
      const auto s = site_of(held ? v.engine : whole, f->parent, f->radical, f->x, t);
      const auto key = fmt::format("{} at {:.0f} K, {}", r.reaction, t, v.full.sources[static_cast<std::size_t>(r.source)].id);
      if (held) out.reverse.list(fmt::format("R + H{}", halogen_name(f->x)), key, s ? Judged::yes : Judged::refused, s ? "" : "outside the domain");
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
