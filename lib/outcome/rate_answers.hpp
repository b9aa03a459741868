// Rates, shares and selectivity of the C-H sites of one molecule for one halogen. Equations: docs/model.md.
#pragma once
#include <array>
#include <vector>

#include "halostep/engine.hpp"
#include "outcome/carbon_sites.hpp"

namespace halostep {

/// Parameters outside the rate model, shared by all sites: those of a complexing solvent.
struct OuterParameters {
  std::array<double, 3> value{};
  std::array<double, 9> covariance{};  // row-major
};

/// What medium and conversion make of the rate of one kind when shares are asked.
struct ShareFactor {
  double medium = 0, reversal = 0;   // added to ln k
  double complexed = 0, forward = 1; // as in SiteOutcome
  double own = 0;                    // variance of both, not shared between kinds
  std::array<double, 3> outer{};     // derivatives to the outer parameters
  RateGradient gradient;             // of ln k with both
};
struct ShareFactors {
  std::vector<ShareFactor> kinds;    // empty: inert medium, no conversion
  std::array<double, 9> outer_covariance{};
};

/// Rates of all kinds of a molecule at one temperature.
struct KindRates {
  std::vector<SiteRate> at;            // per kind, one H, before the encounter limit
  std::vector<double> k;               // per kind: its rate coefficient, cm3 molecule-1 s-1
  std::vector<RateGradient> gradient;  // per kind
  std::vector<double> shared;          // per kind: variance of ln k from what kinds share: parameters, D(H-X), corrections
  std::vector<double> own;             // per kind: variance of ln k nothing else shares
  std::vector<double> by_kind;         // per kind: rate of all its sites, before the limit
  std::vector<double> row;             // per kind: shared covariance with the total, sum over kinds l of C_kl w_l
  double whole = 0;                    // sum over kinds of w_k row_k
  int top = -1;                        // the fastest site
  double top_row = 0, top_whole = 0;   // row of its kind and whole, of the total without that site
  ShareFactors factors;                // already in `at` and `gradient` of reweighted rates; empty for the free atom's
  double total = 0;                    // sum over all sites, before the limit, cm3 molecule-1 s-1
  double damping = 1;                  // what the encounter limit leaves of every rate, 0..1
  double ea_shift = 0;                 // what the limit adds to every activation energy, kJ/mol
};

/// D(H-X) of the halogen; false `with_errors` leaves the error parts empty.
KindRates kind_rates(const CarbonSites& s, const RateBook& rates, const BondModel& model, const AdjustedBook& adjusted, int x,
                     const Quantity& d_hx, int heavy_atoms, double temperature, bool with_errors);

/// Factors that change nothing, to start from.
ShareFactors no_factors(const KindRates& r);
/// wa a + wb b.
RateGradient weighted_sum(const RateGradient& a, double wa, const RateGradient& b, double wb);
/// The same with the factors in: for shares and selectivity, not for rate coefficients.
KindRates reweighted(const KindRates& r, const CarbonSites& s, const RateBook& rates, const BondModel& model,
                     const AdjustedBook& adjusted, int x, const Quantity& d_hx, ShareFactors factors);

/// k of all H of a site, cm3 molecule-1 s-1.
double site_k(const CarbonSites& s, const KindRates& r, std::size_t site);
/// Arrhenius activation energy of a site at T, kJ/mol: R T^2 d ln k / dT, the limit included.
double site_ea(const CarbonSites& s, const KindRates& r, const CarrierModel& m, std::size_t site, double temperature);

/// Standard uncertainty of log10 k of a site; needs `with_errors`.
double u_log10_k(const KindRates& r, const CarbonSites& s, std::size_t site);
/// Standard uncertainties of Ea (kJ/mol) and of the position of the transition state of a site, to first order.
struct BarrierErrors {
  double u_ea = 0, u_position = 0;
};
BarrierErrors barrier_errors(const CarbonSites& s, const RateBook& rates, int x, const Quantity& d_hx, std::size_t site, double temperature);

/// Share of each site (0 for sites outside) with its 95 % range, on the logit scale so that it stays within 0 and 1.
struct Share {
  double share = 0, low = 0, high = 0;
};
std::vector<Share> shares(const CarbonSites& s, const KindRates& r);

/// ln(k_a / k_b) taken apart; all parts are dimensionless and add up.
Selectivity selectivity(const CarbonSites& s, const KindRates& r, const CarrierModel& m, std::size_t a, std::size_t b,
                        double temperature);

}  // namespace halostep
