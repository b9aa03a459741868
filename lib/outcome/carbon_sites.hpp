// The C-H sites of one molecule with what rates and shares need; worked out once for all halogens.
#pragma once
#include <string>
#include <vector>

#include "bonds/answers.hpp"
#include "kinetics/rates.hpp"

namespace halostep {

/// One kind of C-H: sites that share D, its evidence and the rate model's view share their errors too.
struct SiteKind {
  Quantity d;                          // D(R-H), kJ/mol
  double own_u2 = 0;                   // part of u(d)^2 no other kind shares
  EnthalpySum sum;                     // measured, adjusted: d as adjusted enthalpies, which kinds share
  double fitted_u2 = 0;                // part of u(d)^2 from the fitted corrections
  std::vector<FeatureCount> features;  // typed route: shares the fitted corrections with other kinds
  RateSite rate;
};

struct CarbonSite {
  const HydrogenSite* site = nullptr;
  int kind = -1;                       // index into CarbonSites::kinds; -1: outside, see `refusal`
  bool extrapolated = false;           // D rests on thin evidence
  std::string refusal;
};

struct CarbonSites {
  std::vector<SiteKind> kinds;
  std::vector<CarbonSite> sites;       // in order of Analysis::sites(), carbon only
};

CarbonSites carbon_sites(const Analysis& a, const std::vector<SiteBond>& bonds, const BondModel& model);

}  // namespace halostep
