// Fits of the complexing solvents, one model "medium.NAME" each, from relative rates of chlorine with their medium.
#pragma once
#include <memory>
#include <span>
#include <string>
#include <vector>

#include "halostep/tables.hpp"
#include "outcome/engine_impl.hpp"

namespace halostep {

/// One ratio per H of two sites of one substrate in a complexing solvent.
struct MediumSample {
  std::string solvent;
  double molarity = 0, pure = 0, temperature = 0;
  double ln_value = 0, u = 0;
  int row = -1;  // index into Table::relative_rates
  std::shared_ptr<const CarbonSites> sites;
  std::shared_ptr<const Analysis> analysis;
  std::shared_ptr<const Molecule> molecule;
  std::size_t kind = 0, reference = 0;  // indices into CarbonSites::kinds
};

/// All usable rows: chlorine, current, one substrate, a solvent with its molarity that is not inert.
std::vector<MediumSample> medium_samples(const Engine::Impl& impl);
/// ln of the ratio per H under the parameters.
double medium_ln_ratio(const Engine::Impl& impl, const MediumSample& s, const std::array<double, mp::total>& p);

/// One solvent; with fewer than three rows it leans on `like`, the model of another (nullptr: wide priors).
Result<FittedModel> fit_solvent(const Engine::Impl& impl, std::span<const MediumSample> samples,
                                const FittedModel* like);
/// All solvents in order of their names. `table` holds the models fitted so far.
Result<std::vector<FittedModel>> fit_media(const Table& table);

}  // namespace halostep
