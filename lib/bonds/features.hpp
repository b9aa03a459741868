// Structure features of an X-H site and of a C-X replacement: what the typed models are linear in.
#pragma once
#include <string_view>
#include <vector>

#include "environment.hpp"

namespace halostep {

enum class CentreType : std::uint8_t {
  c_sp3, c_vinyl, c_aryl, c_alkynyl, c_acyl, o_alcohol, o_phenol, o_acid, o_hydroperoxide, n_amine, n_aniline, n_amide,
  n_aromatic, s_thiol, s_thiophenol, si, unknown
};
const char* centre_name(CentreType t) noexcept;

struct FeatureCount {
  int feature = 0;  // index into feature_names()
  double count = 0;
  friend bool operator==(const FeatureCount&, const FeatureCount&) = default;
};

struct SiteFeatures {
  CentreType centre = CentreType::unknown;
  std::vector<FeatureCount> features;  // sorted by feature, no zero counts
  const char* not_covered = nullptr;   // why the typed route cannot answer, or nullptr
};

/// Names of all features of the X-H model, in the order of their indices.
const std::vector<std::string_view>& feature_names();
/// Prior standard deviation of a feature's value, kJ/mol (see docs/model.md, ridge term).
double feature_prior(int feature) noexcept;
/// Share of the model scatter that a site with these features sees: plain alkyl sites scatter less than the rest.
double scatter_share(const std::vector<FeatureCount>& f) noexcept;
/// Features of the site "atom `i` loses one H".
SiteFeatures site_features(const Molecule& m, const std::vector<AtomInfo>& info, int i);
/// Human name of the type, e.g. "tertiary C-H", "benzylic C-H, secondary", "O-H, alcohol".
std::string_view site_type(const Molecule& m, const std::vector<AtomInfo>& info, int i);

/// Features of the exchange R-H -> R-X at atom `i`, for the substitution enthalpy (docs/model.md).
const std::vector<std::string_view>& exchange_feature_names();
/// Prior standard deviation of an exchange feature's value, kJ/mol.
double exchange_prior(int feature) noexcept;
std::vector<FeatureCount> exchange_features(const Molecule& m, const std::vector<AtomInfo>& info, int i);

}  // namespace halostep
