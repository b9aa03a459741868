// Enthalpy, entropy and heat capacity of species from the table.
#pragma once
#include <mutex>
#include <optional>
#include <string>
#include <string_view>
#include <unordered_map>
#include <vector>

#include "halostep/molecule.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// Constant-Cp extrapolation from 298.15 K: dH(T) = dH + dCp (T-298.15), dS(T) = dS + dCp ln(T/298.15).
struct ThermoSum {
  double s = 0, cp = 0;             // J mol-1 K-1, sums with stoichiometric signs
  std::vector<std::pair<const SpeciesEntry*, double>> parts;  // what was added, with its sign
  bool s_known = true, cp_known = true;
  std::vector<int> sources;         // of the entropies and heat capacities
  std::string missing;              // first species without entropy
};

/// Standard uncertainties of the sums: a species counts with all it was added for.
double u_of_s(const ThermoSum& sum);
double u_of_cp(const ThermoSum& sum);

class ThermoBook {
 public:
  explicit ThermoBook(const Table& table);
  /// Gas-phase entry of a species by canonical text without stereo, or nullptr.
  [[nodiscard]] const SpeciesEntry* find(std::string_view canonical) const;
  /// The same for a radical, any resonance form.
  [[nodiscard]] const SpeciesEntry* find_radical(const Molecule& radical, std::string_view canonical) const;
  /// Entry of a condensed phase ('l', 'c').
  [[nodiscard]] const SpeciesEntry* find(std::string_view canonical, std::string_view phase) const;
  void add(ThermoSum& sum, const SpeciesEntry* e, double nu, std::string_view name) const;
  [[nodiscard]] std::vector<int> sources(const SpeciesEntry& e) const;

 private:
  const Table& table_;
  std::unordered_map<std::string, int> gas_, condensed_;
  mutable std::once_flag once_;
  mutable std::unordered_map<std::string, int> skeletons_;
};

}  // namespace halostep
