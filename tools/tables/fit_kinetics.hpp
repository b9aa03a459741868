// Fits of the rate model, one per carrier atom.
#pragma once
#include <string>
#include <vector>

#include "bonds/bond_model.hpp"
#include "halostep/tables.hpp"
#include "kinetics/model.hpp"

namespace halostep {

struct RatedSite {
  RateSite site;
  double dh = 0, u_dh = 0;   // kJ/mol
  int h_count = 0;
};

/// One residual of the fit: an absolute rate (sum over `sites`) or a ratio per H of `sites` over `reference`.
struct RateSample {
  int carrier = 0;                       // 0 F .. 3 I
  std::string molecule;                  // canonical text
  std::vector<RatedSite> sites, reference;
  int heavy = 0;
  double temperature = 0;
  double ln_value = 0, u = 0;            // ln of k (cm3) or of the ratio; u in ln units
  int row = -1;                          // index into Table::rates or relative_rates; -1 for a mixture
  bool relative = false, ea_only = false;
  double ea = 0;
};

/// All usable observations. Absolute rates are sampled at the middle and the ends of their own range.
std::vector<RateSample> rate_samples(const Table& t, const BondModel& bonds);
/// Starting values and prior deviations for one carrier; Br, F and I lean on the fitted Cl model.
struct KineticStart {
  std::vector<double> start, prior;
  KineticForm form;
};
KineticStart kinetic_start(int carrier, const std::vector<double>* chlorine);
/// Model value matching sample.ln_value.
double model_ln(const std::vector<double>& p, const KineticForm& form, const RateSample& s);
/// Its derivatives by all parameters.
std::vector<double> model_gradient(const std::vector<double>& p, const KineticForm& form, const RateSample& s);

/// The fit of one carrier's rows from these starts; parameters with a tiny prior deviation stay where they are.
struct KineticFit {
  std::vector<double> values, covariance;  // row-major
  double scatter = 0, effective = 0;
};
Result<KineticFit> fit_form(const std::vector<const RateSample*>& rows, const KineticStart& k, double floor);
/// Rows of one carrier.
std::vector<const RateSample*> of_carrier(const std::vector<RateSample>& samples, int carrier);

/// `floor`: least scatter of ln k the model may claim; a carrier with few rows takes chlorine's.
Result<FittedModel> fit_kinetics(const std::vector<RateSample>& samples, int carrier, const std::vector<double>* chlorine,
                                 double floor = 0.02);

}  // namespace halostep
