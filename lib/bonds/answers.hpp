// Answers about the bonds of one molecule.
#pragma once
#include <array>
#include <vector>

#include "adjusted.hpp"
#include "analysis.hpp"
#include "bond_model.hpp"
#include "evidence.hpp"
#include "halostep/engine.hpp"

namespace halostep {

/// A value for a bond with everything the steps need, before any text is made.
struct BondValue {
  std::optional<Quantity> d;
  Route route = Route::typed;
  bool extrapolated = false;
  int entry = -1;                 // measured: index into Table::bonds
  EnthalpySum sum;                // measured, adjusted: d as a sum of adjusted enthalpies
  EnthalpySum exchange;           // R-X with d from D(R-H): the adjusted D(R-X) - D(R-H), where known
  std::string refusal;
};

/// What bonds, steps and rates all need of one X-H site, worked out once.
struct SiteBond {
  BondValue value;
  std::vector<FeatureCount> features;  // of the typed model; filled where value is typed
  std::vector<FeatureCount> exchange;  // of the exchange H -> X; carbon sites only
  std::array<Quantity, 4> delta{};     // D(R-X) - D(R-H) from the exchange model, F Cl Br I
};

class BondBook {
 public:
  BondBook(const Table& table, const BondModel& model)
      : table_(table), model_(model), adjusted_(table), evidence_(table), hydrogen_(adjusted_.atom("[H]")) {}

  [[nodiscard]] const AdjustedBook& adjusted() const { return adjusted_; }
  /// Value of an entry of the table; its u as the stored covariance gives it, so that every way to a sum ends at the same
  /// digits.
  [[nodiscard]] BondValue entry_value(int entry) const;
  /// Index of the molecule in the joint adjustment, or -1.
  [[nodiscard]] int adjusted_index(const Analysis& a) const;

  /// All X-H sites, in the order of Analysis::sites().
  [[nodiscard]] std::vector<SiteBond> sites(const Analysis& a, bool typed_only) const;
  /// D of X-H at one site.
  [[nodiscard]] BondValue hydrogen(const Analysis& a, const HydrogenSite& s, bool typed_only) const;
  /// D of R-X once X sits at the site (the halide formed), from the table or from D(R-H) and the exchange model.
  [[nodiscard]] BondValue halide(const Analysis& a, const HydrogenSite& s, int x, const BondValue& parent,
                                 const Quantity& delta, bool typed_only) const;
  /// All bonds of the molecule, in order of atoms: X-H first, then bonds between heavy atoms. `sites` as from sites().
  [[nodiscard]] std::vector<BondAnswer> all(const Analysis& a, const std::vector<SiteBond>& sites, const BondOptions& o) const;
  /// Sources behind a value of hydrogen() or halide(): its rows, or those of the most similar bonds.
  [[nodiscard]] std::vector<int> sources(const Analysis& a, const HydrogenSite& s, const BondValue& v) const;
  [[nodiscard]] std::vector<int> halide_sources(const Analysis& a, const HydrogenSite& s, int x, const BondValue& v) const;
  /// Sources of an entry's current rows.
  [[nodiscard]] std::vector<int> entry_sources(int entry) const;

 private:
  /// D of an entry of the table as a sum of adjusted enthalpies; empty where a part is not in the adjustment.
  [[nodiscard]] EnthalpySum entry_sum(int entry) const;
  /// Measured or adjusted value of X-H at an atom of plain(); without value where the table has neither.
  [[nodiscard]] BondValue known(const Analysis& a, int atom) const;
  [[nodiscard]] BondAnswer hydrogen_answer(const Analysis& a, const HydrogenSite& s, const SiteBond& b, const BondOptions& o) const;
  [[nodiscard]] BondAnswer heavy_answer(const Analysis& a, const HeavyBond& h, const BondOptions& o) const;
  void typed_halide(const Analysis& a, const HeavyBond& h, int x, const BondOptions& o, BondAnswer& b) const;
  void deuterium(const Analysis& a, std::vector<BondAnswer>& out) const;
  void explain_entry(int entry, BondAnswer& out) const;
  void explain_sum(const EnthalpySum& sum, BondAnswer& out) const;
  void explain_typed(const LinearModel& m, const std::vector<std::string_view>& names,
                     const std::vector<FeatureCount>& f, BondAnswer& out) const;
  const Table& table_;
  const BondModel& model_;
  AdjustedBook adjusted_;
  Evidence evidence_;
  int hydrogen_;  // the atom, in the adjustment
};

}  // namespace halostep
