// Features of D(R-X) - D(R-H): closed-shell differences only, so the radical's own enthalpy cancels.
#include <array>

#include "features.hpp"

namespace halostep {
namespace {

enum E : int {
  x_base, x_vinyl, x_aryl, x_alkynyl, x_acyl, x_alkyl, x_alkyl2, x_conj, x_carbonyl, x_cyano, x_oxygen, x_nitrogen,
  x_sulfur, x_silyl, x_f, x_f2, x_cl, x_hal2, x_br_i, x_beta_halogen, x_beta_branch, x_small_ring,
  x_acyl_alkyl, x_acyl_other, x_acyl_halogen, x_vinyl_halogen, x_total
};
constexpr std::array<std::string_view, x_total> kNames = {
    "base: sp3 carbon", "vinylic carbon", "aromatic carbon", "alkynyl carbon", "acyl carbon", "alkyl on the carbon",
    "pair alkyl,alkyl", "C=C, aryl or C#C on the carbon", "C=O on the carbon", "CN or NO2 on the carbon",
    "O on the carbon", "N on the carbon", "S on the carbon", "Si on the carbon", "F on the carbon", "pair F,F",
    "Cl on the carbon", "pair of halogens, not F,F", "Br or I on the carbon", "beta halogen", "beta branching",
    "ring of three or four", "acyl: carbon on the carbon", "acyl: O or N on the carbon", "acyl: halogen on the carbon",
    "vinyl: halogen on the carbon"};

using Counts = std::array<double, x_total>;

void saturated(const Molecule& m, const std::vector<AtomInfo>& info, int i, Counts& n) {
  int halogens = 0, fluor = 0;
  for (const auto& nb : m.neighbours(i)) {
    if (m.bond(nb.bond).order != BondOrder::single) continue;
    switch (info[static_cast<std::size_t>(nb.atom)].kind) {
      case Substituent::alkyl: {
        n[x_alkyl] += 1;
        int carbons = 0;
        for (const auto& e : m.neighbours(nb.atom)) {
          n[x_beta_halogen] += e.atom != i && is_halogen(m.atom(e.atom).element);
          carbons += e.atom != i && m.atom(e.atom).element == element::C;
        }
        n[x_beta_branch] += carbons == 3;
        break;
      }
      case Substituent::vinyl: case Substituent::aryl: case Substituent::alkynyl: n[x_conj] += 1; break;
      case Substituent::acyl: case Substituent::carboxyl: n[x_carbonyl] += 1; break;
      case Substituent::cyano: case Substituent::nitro: n[x_cyano] += 1; break;
      case Substituent::oxygen: case Substituent::oxygen_acyl: case Substituent::oxygen_nitro: case Substituent::peroxy: n[x_oxygen] += 1; break;
      case Substituent::nitrogen: case Substituent::nitrogen_acyl: n[x_nitrogen] += 1; break;
      case Substituent::sulfur: case Substituent::sulfinyl: case Substituent::sulfonyl: n[x_sulfur] += 1; break;
      case Substituent::silyl: n[x_silyl] += 1; break;
      case Substituent::fluoro: n[x_f] += 1; ++fluor; break;
      case Substituent::chloro: n[x_cl] += 1; ++halogens; break;
      case Substituent::bromo: case Substituent::iodo: n[x_br_i] += 1; ++halogens; break;
      default: break;
    }
  }
  n[x_alkyl2] = n[x_alkyl] * (n[x_alkyl] - 1) / 2;
  n[x_f2] = fluor * (fluor - 1) / 2.0;
  n[x_hal2] = (halogens + fluor) * (halogens + fluor - 1) / 2.0 - n[x_f2];
  const int ring = info[static_cast<std::size_t>(i)].ring;
  if (ring == 3 || ring == 4) n[x_small_ring] = 1;
}

// On sp2 and sp carbons the same groups act through the pi system: few rows, so few features.
void unsaturated(const Molecule& m, const std::vector<AtomInfo>& info, int i, Counts& n) {
  for (const auto& nb : m.neighbours(i)) {
    if (m.bond(nb.bond).order != BondOrder::single) continue;
    const int z = m.atom(nb.atom).element;
    if (n[x_acyl] > 0) {
      n[x_acyl_halogen] += is_halogen(z);
      n[x_acyl_other] += z == element::O || z == element::N;
      n[x_acyl_alkyl] += z == element::C;
      if (info[static_cast<std::size_t>(nb.atom)].kind != Substituent::alkyl) continue;
      for (const auto& e : m.neighbours(nb.atom)) n[x_beta_halogen] += e.atom != i && is_halogen(m.atom(e.atom).element);
    } else if (n[x_vinyl] > 0) {
      n[x_vinyl_halogen] += is_halogen(z);
    }
  }
}

}  // namespace

const std::vector<std::string_view>& exchange_feature_names() {
  static const std::vector<std::string_view> names(kNames.begin(), kNames.end());
  return names;
}

double exchange_prior(int f) noexcept {
  if (f == x_base) return 1000.0;
  return f == x_alkyl2 || f == x_beta_branch || f == x_small_ring ? 5.0 : 15.0;  // small corrections
}

std::vector<FeatureCount> exchange_features(const Molecule& m, const std::vector<AtomInfo>& info, int i) {
  std::array<double, x_total> n{};
  const auto& a = info[static_cast<std::size_t>(i)];
  n[x_base] = 1;
  if (a.hybrid == Hybrid::aromatic) n[x_aryl] = 1;
  else if (a.carbonyl) n[x_acyl] = 1;
  else if (a.hybrid == Hybrid::sp2) n[x_vinyl] = 1;
  else if (a.hybrid == Hybrid::sp) n[x_alkynyl] = 1;
  if (n[x_acyl] + n[x_vinyl] + n[x_aryl] + n[x_alkynyl] > 0) unsaturated(m, info, i, n);
  else saturated(m, info, i, n);
  std::vector<FeatureCount> out;
  out.reserve(8);
  for (int f = 0; f < x_total; ++f) {
    if (n[static_cast<std::size_t>(f)] != 0) out.push_back({f, n[static_cast<std::size_t>(f)]});
  }
  return out;
}

}  // namespace halostep
