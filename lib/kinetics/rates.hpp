// Rates of X + R-H at the sites of a molecule: the fitted model with its covariance.
#pragma once
#include <optional>
#include <string>
#include <vector>

#include "halostep/quantity.hpp"
#include "halostep/tables.hpp"
#include "gradient.hpp"
#include "model.hpp"

namespace halostep {

struct CarrierModel {
  std::vector<double> p;           // parameters
  std::vector<double> covariance;  // row-major
  std::vector<int> support;
  KineticForm form;
  double scatter = 0;              // of ln k
  double t_low = 0, t_high = 0;    // range of the evidence, K
  std::optional<Quantity> slope;   // straight Evans-Polanyi line through the measured activation energies
  std::string slope_over;
};

/// Models of F, Cl, Br, I in that order; an entry is empty where the table has none.
class RateBook {
 public:
  explicit RateBook(const Table& table);
  [[nodiscard]] const CarrierModel* carrier(int x) const {
    const auto& m = models_[static_cast<std::size_t>(x)];
    return m.p.empty() ? nullptr : &m;
  }
  /// g' C g over the parameters' covariance.
  [[nodiscard]] double variance(int x, const RateGradient& g) const;
  /// C v for a dense vector v over the parameters.
  [[nodiscard]] std::vector<double> times_covariance(int x, const std::vector<double>& v) const;
  /// Why the structure is outside the evidence of the model, or nullptr.
  [[nodiscard]] const char* thin(int x, const RateSite& s) const;

 private:
  std::vector<CarrierModel> models_;
};

}  // namespace halostep
