// Complexing solvents: Cl. + S <-> S.Cl; the free and the complexed atom both abstract. Equations: docs/model.md.
#pragma once
#include <array>
#include <string>
#include <string_view>
#include <vector>

#include "halostep/engine.hpp"
#include "outcome/carbon_sites.hpp"
#include "outcome/rate_answers.hpp"

namespace halostep {

/// Layout of the parameters of a solvent's model "medium.NAME".
namespace mp {
inline constexpr std::size_t binding =
    0;  // kJ/mol, Cl. + S -> S.Cl; the complexed atom finds abstraction that much less exothermic
inline constexpr std::size_t ln_k = 1;  // ln of the equilibrium constant at 298.15 K, L/mol
inline constexpr std::size_t ln_trap =
    2;  // ln of the rate coefficient of Cl. + S, cm3 molecule-1 s-1, on the scale of the gas rates
inline constexpr std::size_t total = 3;
}  // namespace mp
inline constexpr const char* kMediumPrefix = "medium.";
inline constexpr const char* kPureSetting = "mol/L of the pure liquid";

/// One complexing solvent of the table.
struct Complexing {
  std::string name;
  OuterParameters p;
  double pure = 0;               // mol/L of the pure liquid
  double scatter = 0;            // of ln(ratio)
  double t_low = 0, t_high = 0;  // K, range of its rows
};

/// Solvents the table has models for, and the inert ones.
class MediumBook {
 public:
  explicit MediumBook(const Table& table);
  [[nodiscard]] Result<Medium> parse(std::string_view text) const;
  [[nodiscard]] const Complexing* find(std::string_view solvent) const;
  /// "benzene 8 M" as it is printed.
  [[nodiscard]] static std::string text(const Medium& m);
  [[nodiscard]] static bool inert(std::string_view solvent);

 private:
  std::vector<Complexing> solvents_;
};

/// Name and molarity, without asking whether the solvent is known. Errors: usage.
Result<Medium> split_medium(std::string_view text);

/// mol/L of substrate beside the solvent: what volume is left, filled with it.
double substrate_molarity(int heavy_atoms, double solvent_molarity, double pure);

/// What the medium does to each kind, beside the free atom.
struct MediumEffect {
  std::vector<double> ln_factor;  // ln(1 + Q k_complexed / k_free)
  std::vector<double> complexed;  // part of the attack made by the complexed atom
  std::vector<SiteRate> at;       // of the complexed atom, one H
};
MediumEffect medium_effect(const CarbonSites& s, const KindRates& free, const CarrierModel& m, double d_hx,
                           const std::array<double, mp::total>& p, double solvent_molarity, double substrate_molarity,
                           double temperature);

/// Puts the effect of a solvent into weights that start as the free atom's.
void add_medium(ShareFactors& f, const CarbonSites& s, const KindRates& free, const CarrierModel& m, double d_hx,
                const Complexing& solvent, double solvent_molarity, int heavy_atoms, double temperature);

}  // namespace halostep
