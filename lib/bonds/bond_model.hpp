// Bond energies from the table (measured) and from the fitted model (typed). No parsing at look-up.
#pragma once
#include <cstdint>
#include <span>
#include <string>
#include <string_view>
#include <unordered_map>
#include <unordered_set>
#include <vector>

#include "features.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// A fitted linear model over features.
struct LinearModel {
  std::vector<double> value;
  std::vector<int> support;
  std::vector<double> covariance;  // row-major
  double scatter = 0;              // standard deviation of the model about good data, kJ/mol

  static LinearModel from(const FittedModel* m);
  [[nodiscard]] bool empty() const { return value.empty(); }
  /// Sum of count x value with u^2 = x'Cx + (share scatter)^2.
  [[nodiscard]] Quantity predict(const std::vector<FeatureCount>& x, double share = 1.0) const;
  /// x'C y: covariance of two predictions beyond their own scatter.
  [[nodiscard]] double covariance_of(const std::vector<FeatureCount>& x, const std::vector<FeatureCount>& y) const;
};

/// Support below which a correction counts as thin, and its answer as extrapolated.
inline constexpr int kThinSupport = 2;
/// Typed answers with a larger u than this are refused, kJ/mol.
inline constexpr double kTypedLimit = 18.0;

struct TypedBond {
  Quantity d;
  bool extrapolated = false;
  std::string refusal;       // not empty: no answer, and why
};

class BondModel {
 public:
  BondModel(const Table& table, const FittedModel* bonds, std::span<const FittedModel* const> exchange);

  /// Typed D of X-H from its features.
  [[nodiscard]] TypedBond typed(const SiteFeatures& f) const;
  /// Typed D(R-X) - D(R-H); x = 0 F, 1 Cl, 2 Br, 3 I.
  [[nodiscard]] Quantity exchange(int x, const std::vector<FeatureCount>& f) const;
  /// True when the table has any bond of the molecule with this canonical text (without stereo).
  [[nodiscard]] bool known(std::string_view molecule) const { return molecules_.contains(std::string(molecule)); }
  /// False when no molecule of the table has this heavy_signature(): known() need not be asked, nor its text made.
  [[nodiscard]] bool possible(std::uint64_t signature) const { return signatures_.contains(signature); }
  /// Index of the table's entry, or -1. Texts are canonical without stereo; `leaving` "[H]", "[Cl]", ...
  [[nodiscard]] int measured(std::string_view molecule, std::string_view radical, std::string_view leaving) const;

  [[nodiscard]] const LinearModel& bonds() const { return bonds_; }
  [[nodiscard]] const LinearModel& exchange_model(int x) const { return exchange_[static_cast<std::size_t>(x)]; }

 private:
  LinearModel bonds_;
  std::vector<LinearModel> exchange_;
  std::unordered_map<std::string, int> entries_;
  std::unordered_set<std::string> molecules_;
  std::unordered_set<std::uint64_t> signatures_;
};

const FittedModel* find_model(const std::vector<FittedModel>& models, std::string_view name);

}  // namespace halostep
