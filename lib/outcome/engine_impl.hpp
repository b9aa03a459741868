// What an Engine holds.
#pragma once
#include "bonds/answers.hpp"
#include "halostep/engine.hpp"
#include "kinetics/rates.hpp"
#include "outcome/carbon_sites.hpp"
#include "outcome/medium.hpp"
#include "outcome/rate_answers.hpp"
#include "outcome/rate_evidence.hpp"
#include "outcome/reversal.hpp"
#include "steps/steps.hpp"
#include "steps/thermo.hpp"

namespace halostep {

/// Absent where the table has no rate model for the halogen.
struct HalogenRates {
  Halogen halogen = Halogen::Cl;
  std::optional<KindRates> rates;
};

/// Medium and conversion, checked.
struct Conditions {
  Medium medium;
  double conversion = 0, per_x2 = 0;
};

struct Engine::Impl {
  explicit Impl(Table t);

  /// Rate model and D(H-X), or nothing where the table lacks one of them.
  [[nodiscard]] const CarrierModel* carrier(int x) const { return steps.halogen(x).d_hx ? rates.carrier(x) : nullptr; }
  [[nodiscard]] Result<std::vector<BondAnswer>> bond_answers(const Analysis& a, const std::vector<SiteBond>& sites, const BondOptions& o) const;
  [[nodiscard]] std::vector<StepAnswer> step_answers(const Analysis& a, const std::vector<SiteBond>& sites, const CarbonSites& c,
                                                     std::span<const HalogenRates> rated, double temperature,
                                                     const BondOptions& o) const;
  [[nodiscard]] Result<std::vector<HalogenOutcome>> outcome_answers(const Analysis& a, const CarbonSites& c,
                                                                    std::span<const HalogenRates> rated, double temperature,
                                                                    bool details, const Conditions& conditions = {}) const;
  /// Errors: usage.
  [[nodiscard]] Result<Conditions> conditions(const OutcomeOptions& o) const;
  /// The rates that shares are made of: those of the free atom with medium and reversal in. Adds notes.
  [[nodiscard]] KindRates share_rates(const Analysis& a, const CarbonSites& c, const KindRates& free, int x, double temperature,
                                      const Conditions& conditions, std::vector<std::string>& notes, std::string& why_forward) const;
  /// Sources behind the D of all kinds of C-H.
  [[nodiscard]] std::vector<int> bond_sources(const Analysis& a, const CarbonSites& c) const;
  /// Rates of all kinds for each halogen; `with_errors` where shares are wanted.
  [[nodiscard]] std::vector<HalogenRates> halogen_rates(const Analysis& a, const CarbonSites& c, std::span<const Halogen> halogens,
                                                        double temperature, bool with_errors) const;
  /// Adds Ea and k to a reaction X + RH or R + HX.
  void add_rate(StepAnswer& s, std::string_view text) const;

  Table table;
  BondModel model;
  BondBook bonds;
  ThermoBook thermo;
  StepBook steps;
  RateBook rates;
  RateEvidence rate_evidence;
  MediumBook media;
  ReversalBook reversal;
};

}  // namespace halostep
