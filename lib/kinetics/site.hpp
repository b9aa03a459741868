// What the rate model reads off the structure at one C-H site.
#pragma once
#include <array>
#include <cstdint>
#include <string_view>
#include <vector>

#include "../bonds/environment.hpp"

namespace halostep {

/// Classes of the per-H pre-exponential factor.
enum class AClass : std::uint8_t { alkyl, alpha_oxygen, alpha_hetero, benzylic, allylic, acyl, formate, cyclopropyl, unsaturated };
inline constexpr int kAClasses = static_cast<int>(AClass::unsaturated) + 1;
const char* a_class_name(AClass c) noexcept;

/// Groups whose field slows attack by an electrophilic atom.
enum class PolarGroup : std::uint8_t {
  fluorine, chlorine, bromine, iodine, oxygen, oxygen_acyl, carbonyl, carboxyl, carbonyl_halide, cyano, nitro, nitrate, nitrogen, sulfur, aryl, unsaturated
};
inline constexpr int kPolarGroups = static_cast<int>(PolarGroup::unsaturated) + 1;
const char* polar_group_name(PolarGroup g) noexcept;

/// Bonds between the centre and the group's first atom, counted up to this distance.
inline constexpr int kPolarReach = 6;

struct RateSite {
  AClass a_class = AClass::alkyl;
  int carbons = 0;            // carbon neighbours of the centre
  int small_ring = 0;         // 3, 4, 5 or 0
  bool covered = true;        // false where the rate model has no evidence for the kind of centre
  std::uint32_t present = 0;  // bit g set where group g has a count
  std::uint8_t oxygens = 0;       // oxygens on the centre whose lone pair is free
  std::uint8_t far_halogens = 0;  // halogens on the carbons behind those oxygens
  std::uint8_t quaternary = 0;    // carbons beside the centre that carry four carbons
  // count[group][distance-1]
  std::array<std::array<std::uint8_t, kPolarReach>, kPolarGroups> count{};
  bool operator==(const RateSite&) const = default;
};

/// Acyl and formate C-H: the centre is a carbonyl carbon.
inline bool is_acyl(AClass c) noexcept { return c == AClass::acyl || c == AClass::formate; }

/// Groups within two bonds, or a class of its own: not a plain alkane site.
bool acted_on(const RateSite& s) noexcept;

/// Share of the rate model's scatter that a site sees: alkane sites scatter little, others the more the more groups
/// act on them.
double scatter_share(const RateSite& s) noexcept;

RateSite rate_site(const Molecule& m, const std::vector<AtomInfo>& info, int atom);

}  // namespace halostep
