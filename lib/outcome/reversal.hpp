// R. + HX -> RH + X. against R. + X2 -> RX + X.: which part of the radicals of a site ends as halide.
#pragma once
#include <mutex>
#include <string>
#include <vector>

#include "bonds/analysis.hpp"
#include "outcome/carbon_sites.hpp"
#include "outcome/rate_answers.hpp"
#include "steps/steps.hpp"

namespace halostep {

/// HX per X2 when `conversion` of the substrate is gone and `halogen_ratio` X2 per substrate was there at the start.
/// Errors: usage (conversion outside 0..1, ratio not positive, all X2 gone).
Result<double> hx_per_x2(double conversion, double halogen_ratio);

/// ln of a rate coefficient, cm3 molecule-1 s-1, and its standard uncertainty.
struct LnRate {
  double value = 0, u = 0;
  bool measured = false;  // for this radical, not only its class
};

/// Rates of R. + X2 from the table's rows of that step. Rows of other radicals of the class (carbons on the radical
/// carbon; conjugated or not) stand in where a radical has none, and those of bromine for iodine.
/// Built at the first question, then constant; thread-safe.
class TransferBook {
 public:
  explicit TransferBook(const Table& table) : table_(table) {}
  [[nodiscard]] std::optional<LnRate> rate(int x, const std::string& radical, const RateSite& site,
                                           double temperature) const;

 private:
  struct Known {
    int x = 0, row = 0, carbons = 0;
    bool conjugated = false;
    std::string radical;  // canonical, without stereo
  };
  void read() const;
  [[nodiscard]] std::optional<LnRate> of_class(int x, const RateSite& site, double temperature) const;
  const Table& table_;
  mutable std::once_flag once_;
  mutable std::vector<Known> known_;
};

/// S(R.) - S(RH) less R ln(number of H), J mol-1 K-1: what one H leaves behind. From the table, else from a straight
/// line over the carbons on the centre through methane, ethane, propane and isobutane, as far as the table has them.
class RadicalEntropy {
 public:
  explicit RadicalEntropy(const ThermoBook& thermo);
  [[nodiscard]] std::optional<Quantity> of(const Analysis& a, const CarbonSite& site, const RateSite& rate) const;

 private:
  [[nodiscard]] std::optional<double> known(const Molecule& m, const HydrogenSite& site) const;
  const ThermoBook& thermo_;
  double at_none_ = 0, per_carbon_ = 0;
  int points_ = 0;
};

struct ReversalBook {
  ReversalBook(const Table& table, const ThermoBook& thermo) : transfer(table), entropy(thermo) {}
  TransferBook transfer;
  RadicalEntropy entropy;
};

/// Puts the reversal into weights that start as the free atom's; on the way out `why` says what was missing, and then
/// the factors are unchanged.
void add_reversal(ShareFactors& f, const Analysis& a, const CarbonSites& s, const KindRates& free,
                  const ReversalBook& book, const HalogenData& h, int x, double per_x2, double temperature,
                  std::string& why);

}  // namespace halostep
