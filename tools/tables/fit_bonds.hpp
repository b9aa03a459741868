// Fits of the typed bond models; rows may be left out for cross-validation.
#pragma once
#include <Eigen/Dense>
#include <functional>
#include <string>
#include <vector>

#include "bonds/bond_model.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// One X-H bond of the table, ready for the fit.
struct BondSample {
  int entry = 0;               // index into Table::bonds
  std::string molecule;        // canonical text
  SiteFeatures features;
  double d = 0, u = 0;
  std::string type;
};

/// One D(R-X) - D(R-H) of the table.
struct ExchangeSample {
  std::string molecule;        // RX, canonical text
  int halogen = 0;             // 0 F .. 3 I
  std::vector<FeatureCount> features;
  double delta = 0, u = 0;
};

std::vector<BondSample> bond_samples(const Table& t);
std::vector<ExchangeSample> exchange_samples(const Table& t);

Result<FittedModel> fit_bonds(const std::vector<BondSample>& samples);
/// One fit for F, Cl, Br and I together: four models, in that order (docs/model.md).
Result<std::vector<FittedModel>> fit_exchange(const std::vector<ExchangeSample>& samples);

/// Packs a solution as a model of the table.
FittedModel pack_model(std::string name, std::vector<std::string> parameters, const Eigen::VectorXd& values,
                       const Eigen::MatrixXd& covariance, std::vector<int> support,
                       std::vector<std::pair<std::string, double>> settings);

}  // namespace halostep
