// Derivatives of ln k per H, in closed form.
#pragma once
#include <vector>

#include "model.hpp"

namespace halostep {

struct Partial {
  int parameter = 0;
  double value = 0;
};

struct RateGradient {
  std::vector<Partial> parameters;  // only those the site touches
  double dh = 0;                    // d ln k / d(step enthalpy), mol/kJ
};

RateGradient rate_gradient(std::span<const double> p, const KineticForm& form, const RateSite& s, const SiteRate& at,
                           double temperature);

}  // namespace halostep
