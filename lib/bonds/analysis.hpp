// One molecule made ready for questions: classes, environment, canonical text, sites.
#pragma once
#include <string>
#include <vector>

#include "environment.hpp"
#include "halostep/molecule.hpp"
#include "locate.hpp"

namespace halostep {

/// Heavy bonds of one kind that the engine speaks about: C-X and the weak bonds of initiators.
struct HeavyBond {
  int bond = 0;             // first of its class, index into Molecule::bond
  int count = 0;            // equivalent bonds
  int centre = 0, partner = 0;
};

/// Isotope labels of heavy atoms and deuterium do not change the type: `plain` has none, D counted as H there.
class Analysis {
 public:
  /// Without `whole` there are no classes, sites and heavy bonds: enough for questions about one known atom.
  explicit Analysis(const Molecule& m, bool whole = true);

  [[nodiscard]] const Molecule& original() const { return original_; }
  [[nodiscard]] const Molecule& plain() const { return has_plain_ ? plain_ : original_; }
  [[nodiscard]] int to_plain(int atom) const { return has_plain_ ? map_[static_cast<std::size_t>(atom)] : atom; }
  [[nodiscard]] const std::vector<AtomInfo>& info() const { return info_; }
  [[nodiscard]] const std::vector<int>& classes() const { return classes_; }
  [[nodiscard]] const std::vector<HydrogenSite>& sites() const { return sites_; }
  [[nodiscard]] const std::vector<HeavyBond>& heavy_bonds() const { return heavy_; }
  [[nodiscard]] int deuterium_count() const { return deuterium_; }
  /// Canonical text of the plain molecule, without stereo: the key of the table.
  /// Made at the first call; an Analysis belongs to one thread.
  [[nodiscard]] const std::string& key() const;
  /// heavy_signature() of the molecule.
  [[nodiscard]] std::uint64_t signature() const { return signature_; }
  [[nodiscard]] int heavy_atoms() const { return heavy_atoms_; }

 private:
  const Molecule& original_;
  Molecule plain_;
  bool has_plain_ = false;
  std::vector<int> map_, classes_;
  std::vector<AtomInfo> info_;
  std::vector<HydrogenSite> sites_;
  std::vector<HeavyBond> heavy_;
  mutable std::string key_;
  std::uint64_t signature_ = 0;
  int deuterium_ = 0, heavy_atoms_ = 0;
};

}  // namespace halostep
