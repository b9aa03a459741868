// Enthalpy, entropy and equilibrium of the steps of a chain and of single elementary steps.
#pragma once
#include <span>
#include <vector>

#include "../bonds/answers.hpp"
#include "halostep/engine.hpp"
#include "thermo.hpp"

namespace halostep {

/// Constants of one halogen, from the table.
struct HalogenData {
  std::optional<Quantity> d_xx, d_hx;        // D(X-X), D(H-X)
  double u2_pair = 0;                        // variance of D(X-X) - D(H-X): both hold X
  int entry_xx = -1, entry_hx = -1;          // rows of Table::bonds
  EnthalpySum sum_xx, sum_hx;                // the same as sums of adjusted enthalpies; empty where not in the adjustment
  const SpeciesEntry *atom = nullptr, *molecule = nullptr, *hydride = nullptr;
};

/// Where the enthalpy of a step comes from: StepAnswer::route.
inline constexpr const char* kJoint = "joint adjustment";
inline constexpr const char* kTyped = "typed";
inline constexpr const char* kMixed = "joint adjustment and typed";

class StepBook {
 public:
  StepBook(const Table& table, const BondModel& model, const BondBook& bonds, const ThermoBook& thermo);
  [[nodiscard]] const HalogenData& halogen(int x) const { return halogens_[static_cast<std::size_t>(x)]; }
  /// Step enthalpy of abstraction at a site, D(R-H) - D(H-X); empty with `why` when a bond is missing.
  [[nodiscard]] std::vector<StepAnswer> chain(const Analysis& a, const std::vector<SiteBond>& sites,
                                              std::span<const Halogen> halogens, double temperature, const BondOptions& o) const;
  /// One step written as reaction SMILES.
  [[nodiscard]] Result<StepAnswer> reaction(std::string_view text, double temperature) const;

 private:
  struct SiteData;
  class Hess;
  void initiation(int x, double t, bool details, std::vector<StepAnswer>& out) const;
  void enthalpies(const BondValue& rh, const BondValue& rx, const Quantity& delta, const HalogenData& h, StepAnswer& abstraction,
                  StepAnswer& transfer, StepAnswer& net) const;
  [[nodiscard]] std::optional<Quantity> dimer_bond(const Analysis& a, const BondValue& d, const std::string& dimer) const;
  void site_steps(const Analysis& a, SiteData& s, int x, double t, const BondOptions& o, std::vector<StepAnswer>& out) const;
  /// `transfer_at`: where the transfer step of the site stands in `out`; its bond is R-X here.
  void terminations(const Analysis& a, const SiteData& s, std::size_t transfer_at, int x, double t, const BondOptions& o,
                    std::vector<StepAnswer>& out) const;
  const Table& table_;
  const BondModel& model_;
  const BondBook& bonds_;
  const ThermoBook& thermo_;
  std::vector<HalogenData> halogens_;
};

/// Fills ds, dg and log10_k of a step from its entropy sum, or says why not.
void finish(StepAnswer& s, const ThermoSum& sum, double temperature);

}  // namespace halostep
