// Medium and conversion: what they make of the free atom's rates when shares are asked.
#include <fmt/format.h>

#include <algorithm>

#include "outcome/engine_impl.hpp"

namespace halostep {

std::optional<Error> check_conversion(double conversion, double halogen_ratio) {
  const auto ratio = hx_per_x2(conversion, halogen_ratio);
  return ratio.ok() ? std::nullopt : std::optional(ratio.error());
}

Result<Conditions> Engine::Impl::conditions(const OutcomeOptions& o) const {
  auto medium = media.parse(o.medium);
  if (!medium.ok()) return medium.error();
  const auto ratio = hx_per_x2(o.conversion, o.halogen_ratio);
  if (!ratio.ok()) return ratio.error();
  return Conditions{std::move(medium).value(), o.conversion, ratio.value()};
}

KindRates Engine::Impl::share_rates(const Analysis& a, const CarbonSites& c, const KindRates& free, int x,
                                    double temperature, const Conditions& conditions, std::vector<std::string>& notes,
                                    std::string& why_forward) const {
  const auto& d_hx = *steps.halogen(x).d_hx;
  const bool complexing = conditions.medium.complexing, chlorine = x == static_cast<int>(Halogen::Cl);
  const bool covered = std::any_of(c.sites.begin(), c.sites.end(), [](const CarbonSite& s) { return s.kind >= 0; });
  const bool arene =
      std::any_of(a.info().begin(), a.info().end(), [](const AtomInfo& i) { return i.kind == Substituent::aryl; });
  if (complexing && !chlorine)
    notes.push_back(
        "complexing solvents are modelled for chlorine atoms only; the shares are those of an inert medium");
  if (chlorine && arene && conditions.medium.solvent == "neat") {
    notes.push_back(
        "a neat arene complexes chlorine atoms itself: give the arene most like it as the medium, such as \"toluene 8 "
        "M\"");
  }
  const bool medium = complexing && chlorine && covered, reversed = conditions.per_x2 > 0 && covered;
  if (!medium && !reversed) return free;
  auto f = no_factors(free);
  if (medium) {
    const auto& solvent = *media.find(conditions.medium.solvent);
    add_medium(f, c, free, *carrier(x), d_hx.value, solvent, conditions.medium.molarity, a.heavy_atoms(), temperature);
    notes.push_back(
        "the complexed atom attacks too, slower and more selectively: it acts on the shares; rate coefficients stay "
        "those of the free atom");
    if (temperature < solvent.t_low - 1 || temperature > solvent.t_high + 1) {
      const auto low = format_fixed(solvent.t_low, 0), high = format_fixed(solvent.t_high, 0);
      notes.push_back(fmt::format("the evidence for {} is of {} K{}", solvent.name, low == high ? low : low + " to " + high,
                                  low == high ? " alone" : ""));
    }
  }
  if (reversed) {
    add_reversal(f, a, c, free, reversal, steps.halogen(x), x, conditions.per_x2, temperature, why_forward);
    if (!why_forward.empty())
      notes.push_back("the conversion changes nothing here: " + why_forward);
    else
      notes.push_back(
          "shares are of the halide formed at this conversion; what formed before lies between them and those at "
          "conversion 0");
  }
  return reweighted(free, c, rates, model, bonds.adjusted(), x, d_hx, std::move(f));
}

}  // namespace halostep
