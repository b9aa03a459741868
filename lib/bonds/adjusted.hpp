// Enthalpies of the joint adjustment, read from the table: sums of them with their covariance.
#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <unordered_map>
#include <unordered_set>
#include <vector>

#include "halostep/molecule.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// Bonds from adjusted enthalpies with a larger u than this are left to the typed model, kJ/mol.
inline constexpr double kAdjustedLimit = 10.0;

/// A species of Table::adjusted and how often it stands in a sum.
struct EnthalpyTerm {
  int species = 0;
  double factor = 1;
};

/// Sum of factor * enthalpy of formation; no species twice.
using EnthalpySum = std::vector<EnthalpyTerm>;

/// Adds a term; equal species merge, and those that cancel leave the sum.
void add_term(EnthalpySum& sum, int species, double factor);
/// Adds every term of `more`, times `factor`.
void add_terms(EnthalpySum& sum, const EnthalpySum& more, double factor);

class AdjustedBook {
 public:
  explicit AdjustedBook(const Table& table);

  /// Index into Table::adjusted of a species_key(), or -1.
  [[nodiscard]] int find(std::string_view key) const;
  /// The same of an atom, as "[H]" or "[Cl]".
  [[nodiscard]] int atom(const char* smiles) const { return find(std::string("1 unpaired: ") + smiles); }
  /// False when no closed-shell species has this heavy_signature(): find() need not be asked, nor its text made.
  [[nodiscard]] bool possible(std::uint64_t signature) const { return signatures_.contains(signature); }
  /// Value with u from the covariance, kJ/mol; empty when the sum hangs on a molecule whose enthalpy is not known.
  [[nodiscard]] std::optional<Quantity> value(const EnthalpySum& sum) const;
  /// True when the enthalpy of a species is known within kAdjustedLimit.
  [[nodiscard]] bool firm(int i) const { return species(i).datum < 0 && covariance(i, i) <= kAdjustedLimit * kAdjustedLimit; }
  /// The species on whose unknown enthalpy a sum hangs, as SMILES; empty when there is none.
  [[nodiscard]] std::string missing(const EnthalpySum& sum) const;
  [[nodiscard]] double covariance(const EnthalpySum& a, const EnthalpySum& b) const;
  /// Sources of the rows that speak of a species: its enthalpies, and bonds that form it as a radical.
  [[nodiscard]] const std::vector<int>& sources(int species) const { return sources_[static_cast<std::size_t>(species)]; }
  /// Sources behind all species of a sum but atoms and elements.
  [[nodiscard]] std::vector<int> sources(const EnthalpySum& sum) const;
  [[nodiscard]] const AdjustedSpecies& species(int i) const { return table_.adjusted[static_cast<std::size_t>(i)]; }

 private:
  [[nodiscard]] double covariance(int a, int b) const;
  const Table& table_;
  std::unordered_map<std::string_view, int> at_;
  std::unordered_set<std::uint64_t> signatures_;
  std::vector<std::vector<int>> sources_;
};

}  // namespace halostep
