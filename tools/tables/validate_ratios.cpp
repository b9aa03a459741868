#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

constexpr const char* kNotCounted[] = {"textbook scale",     "upper limit",   "taught limit", "extrapolated",
                                       "arithmetic on rate", "off the trend", "complexes"};
constexpr double kDiffer = 1.5;

bool counts(const RelativeRateRow& r) {
  if (r.superseded || r.ratio <= 0 || r.medium.find(" M") != std::string::npos) return false;
  return std::none_of(std::begin(kNotCounted), std::end(kNotCounted),
                      [&](const char* w) { return r.note.find(w) != std::string::npos; });
}

struct SiteRateSeen {
  double per_h = 0, variance = 0, naive = 0;  // relative within one substrate when it is one molecule
};

std::optional<SiteRateSeen> site_of(const Engine& engine, const std::string& molecule, const std::string& radical,
                                    const RelativeRateRow& row) {
  const auto m = parse_smiles(molecule);
  const auto r = parse_smiles(radical, ParseMode::species);
  if (!m.ok() || !r.ok()) return std::nullopt;
  const auto x = *carrier_of(row.reagent);
  const Halogen one[] = {x};
  const auto o = engine.outcome(m.value(), one, row.t, judged_conditions(engine, m.value(), row.medium, row.reagent));
  if (!o.ok()) return std::nullopt;
  const int atom = find_site(m.value(), symmetry_classes(m.value()), r.value());
  for (const auto& s : o.value()[0].sites) {
    if (s.atom != atom) continue;
    const double u = s.u_log10_k;
    return SiteRateSeen{s.k_cm3_s * s.forward.value_or(1.0) / s.h_count, u * u, naive_per_h(x, m.value(), s.atom)};
  }
  return std::nullopt;
}

}  // namespace

void judge_ratios(const FoldView& v, Validation& out) {
  for (const auto& r : v.full.relative_rates) {
    const auto x = carrier_of(r.reagent);
    const auto m = parse_smiles(r.molecule);
    if (!counts(r) || !x || !m.ok() || v.folds.of(r.molecule) != v.fold) continue;
    auto& c = out.ratios.classes[fmt::format("{} + {}", r.reagent,
                                             is_hydrocarbon(m.value()) ? "hydrocarbons" : "polar substrates")];
    const auto a = site_of(v.engine, r.molecule, r.radical, r);
    const auto b = site_of(v.engine, r.reference_molecule, r.reference_radical, r);
    const auto key = fmt::format("{} at {:.0f} K, {}: {} of {} against {} of {}, {}", r.reagent, r.t, r.medium, r.radical, r.molecule,
                                 r.reference_radical, r.reference_molecule, v.full.sources[static_cast<std::size_t>(r.source)].id);
    if (!a || !b) {
      out.ratios.list(r.reagent, key, Judged::refused, "outside the domain");
      ++c.refused;
      continue;
    }
    out.ratios.list(r.reagent, key);
    const double seen = std::log10(r.ratio), e = std::log10(a->per_h / b->per_h) - seen;
    c.add(e, std::hypot(std::sqrt(a->variance + b->variance), r.u_log10), std::log10(a->naive / b->naive) - seen);
    if (std::abs(seen) > std::log10(kDiffer)) {
      const auto wrong = [&](double d) { return d * seen > 0 ? 0.0 : 1.0; };
      out.ratios.classes[fmt::format("order, {}", r.reagent)].add(wrong(e + seen),
                                                                  wrong(std::log10(a->naive / b->naive)));
    }
    out.ratios.row(
        e, fmt::format("{} at {:.0f} K, {}: {} of {} against {} of {}: {:.3g}, row {:.3g}", r.reagent, r.t, r.medium,
                       r.radical, r.molecule, r.reference_radical, r.reference_molecule, a->per_h / b->per_h, r.ratio));
  }
}

}  // namespace halostep
