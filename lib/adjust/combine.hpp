// One value from several measurements of it.
#pragma once
#include <span>

#include "halostep/quantity.hpp"

namespace halostep {

struct Combined {
  Quantity value;
  double tau = 0;  // scatter between the sources beyond their stated u, in the unit of the values
};

/// Weighted mean with weights 1/(u_i^2 + tau^2); tau^2 is the moment estimator of DerSimonian and Laird,
/// Controlled Clin. Trials 1986, 7, 177 (doi:10.1016/0197-2456(86)90046-2). u = 1/sqrt(sum of weights), so the
/// spread is in it. One value is returned as it is. Precondition: not empty, every u > 0.
Combined combine(std::span<const Quantity> values);

/// Weight (0 to 1; the weights sum to 1) of one value in the combined one.
double combine_weight(const Quantity& one, const Combined& all) noexcept;

}  // namespace halostep
