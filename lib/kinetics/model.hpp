// Rate model of X + R-H -> HX + R, one per carrier atom. Equations and sources in docs/model.md.
#pragma once
#include <array>
#include <span>
#include <string>
#include <vector>

#include "site.hpp"

namespace halostep {

/// Conjugating groups that withdraw electrons: carbonyl, carboxyl, COX, CN, NO2.
inline constexpr int kWithdrawing = 5;
inline constexpr std::array<PolarGroup, kWithdrawing> kWithdrawingGroups = {
    PolarGroup::carbonyl, PolarGroup::carboxyl, PolarGroup::carbonyl_halide, PolarGroup::cyano, PolarGroup::nitro};

/// Layout of the parameter vector of a kinetic model.
namespace kp {
inline constexpr int ln_a = 0;                            // ln of the per-H factor at 298 K, alkyl (cm3 molecule-1 s-1)
inline constexpr int a_class = 1;                         // + class - 1: offset of ln A
inline constexpr int tightness = a_class + kAClasses - 1; // ln A falls by tightness * position
inline constexpr int exponent = tightness + 1;            // T exponent
inline constexpr int shift = exponent + 1;                // kJ/mol, intercept of the effective step enthalpy
inline constexpr int shift_class = shift + 1;             // + class - 1
inline constexpr int width = shift_class + kAClasses - 1; // kJ/mol, half width of the bend
inline constexpr int alkyl = width + 1;                   // kJ/mol, first carbon on the centre
inline constexpr int polar_alpha = alkyl + 1;             // + group: kJ/mol, group on the centre
inline constexpr int polar_beyond = polar_alpha + kPolarGroups;  // + group: kJ/mol, group one bond further
inline constexpr int decay = polar_beyond + kPolarGroups; // factor per further bond
inline constexpr int ln_limit = decay + 1;                // ln of the encounter limit at one heavy atom
inline constexpr int limit_power = ln_limit + 1;          // its growth with the number of heavy atoms
inline constexpr int saturation = limit_power + 1;         // kJ/mol, what the groups' sum cannot exceed
inline constexpr int screen = saturation + 1;             // factor on polar groups per alkyl group on the centre
inline constexpr int bare = screen + 1;                   // kJ/mol, nothing on the centre that gives electrons (CH4, CH3-X)
inline constexpr int a_alkyl = bare + 1;                  // ln A per carbon on the centre
inline constexpr int unfelt = a_alkyl + 1;                // + k: kJ/mol, weakening of the bond by withdrawing_group(k) not felt
inline constexpr int repeat = unfelt + kWithdrawing;      // factor per further F, + 1: per further Cl, Br or I on the centre
inline constexpr int captive = repeat + 2;                // kJ/mol per withdrawing group beside a halogen on the centre
inline constexpr int tie = captive + 1;                   // hold on an oxygen's lone pair per halogen behind it
inline constexpr int tied_shift = tie + 1;                // kJ/mol, shift of alpha-O when the lone pair is held
inline constexpr int oxygen_field = tied_shift + 1;       // factor on groups further away, alpha-O
inline constexpr int acyl_field = oxygen_field + 1;       // the same, acyl and formate
inline constexpr int fluoro_ether = acyl_field + 1;       // kJ/mol shift per F beside an oxygen on the centre
inline constexpr int acyl_halide = fluoro_ether + 1;      // kJ/mol shift per halogen on an acyl centre
inline constexpr int alkyl_repeat = acyl_halide + 1;      // factor per further carbon on the centre
inline constexpr int plain_repeat = alkyl_repeat + 1;     // the same for plain alkane sites
inline constexpr int a_branch = plain_repeat + 1;         // ln A, second carbon on the centre
inline constexpr int a_branch_repeat = a_branch + 1;      // factor of the third
inline constexpr int a_quaternary = a_branch_repeat + 1;   // ln A per quaternary carbon beside the centre
inline constexpr int total = a_quaternary + 1;
}  // namespace kp

/// Names of the parameters, in order.
std::vector<std::string> kinetic_parameter_names();

/// Polar energies of the groups around a site, kJ/mol, and the factors that act on them.
struct PolarParts {
  std::array<double, 2> halogens{};      // F; Cl, Br and I on the centre, each counted fully
  std::array<double, 2> repeat{1, 1}, d_repeat{};  // what repetition leaves of them; its derivative
  double alpha = 0, beyond = 0;          // on the centre, repeated halogens less; further away
  double screen = 1, screen_beyond = 1;  // alkyl groups on the centre screen it
  double free = 1;                       // share of the oxygens' lone pairs that is free; 1 without such oxygens
  double field = 1;                      // factor on groups further away
  double bare = 0;                       // 1 where nothing on the centre gives electrons
  double carbons = 0, d_carbons = 0;     // carbons on the centre, repeated ones less; its derivative
  double branches = 0, d_branches = 0;   // the same from the second carbon on, for ln A
  bool plain = false;                    // alkane site that no group acts on
  double sum = 0;                        // screened alpha and beyond
  double left = 1;                       // exp(-sum/S): what a further group still counts
  int alkyls = 0;                        // carbons on the centre that do not conjugate
  std::array<int, 2> halogen_count{};    // as `halogens`
  int withdrawing = 0;                   // on the centre
  [[nodiscard]] int all_halogens() const { return halogen_count[0] + halogen_count[1]; }
};

/// Rate of one H, at T.
struct SiteRate {
  PolarParts parts;      // of the polar energy
  double ln_k = 0;       // ln of k per H before the encounter limit
  double ln_a = 0;       // its pre-exponential part at T
  double barrier = 0;    // threshold energy, kJ/mol
  double position = 0;   // d barrier / d (effective step enthalpy): 0 reactant-like, 1 product-like
  double effective = 0;  // dh + shift (+ polar), kJ/mol
  double shift = 0;      // of the step enthalpy: common, class, oxygen, bond weakening not felt, kJ/mol
  double polar = 0;      // polar energy, kJ/mol
};

struct KineticForm {
  bool polar_outside = false;  // add the polar energy to the barrier, not to the step enthalpy (F)
};

/// Groups whose pi system takes the odd electron.
bool conjugates(int group) noexcept;
PolarParts polar_parts(std::span<const double> p, const RateSite& s);
/// Polar energy of a site, kJ/mol: carbons on the centre, the lack of donors, and the sum g of all groups as
/// S (1 - exp(-g/S)), since each further group finds the centre already poorer in electrons.
double polar_energy(std::span<const double> p, const PolarParts& parts);
inline double polar_energy(std::span<const double> p, const RateSite& s) { return polar_energy(p, polar_parts(p, s)); }
SiteRate site_rate(std::span<const double> p, const KineticForm& form, const RateSite& s, double dh, double temperature);
/// Encounter limit for a molecule with that many heavy atoms, cm3 molecule-1 s-1.
double encounter_limit(std::span<const double> p, int heavy_atoms);
/// Total rate under the limit: (sum^-q + limit^-q)^(-1/q), q = 3.
double limited_total(double sum, double limit);

}  // namespace halostep
