// Features of D(R-X) - D(R-H): closed-shell differences only, so the radical's own enthalpy cancels.
#include <array>

#include "features.hpp"

namespace halostep {
namespace {

enum E : int {
  x_base, x_sp2, x_sp, x_acyl,
  // groups on an sp3 carbon
  x_alkyl, x_conj, x_carbonyl, x_cyano, x_oxygen, x_nitrogen, x_sulfur, x_silyl, x_f, x_cl, x_br, x_i,
  // groups on a carbonyl or vinylic carbon
  x_acyl_carbon, x_acyl_other, x_acyl_f, x_acyl_hal, x_vinyl_carbon, x_vinyl_f, x_vinyl_hal,
  // from here on small: pairs, what stands further off, rings
  x_alkyl2, x_alkyl_conj, x_alkyl_f, x_alkyl_hal, x_f2, x_f3, x_f_hal, x_hal2, x_hal3,
  x_beta_f, x_beta_hal, x_beta_o, x_beta_branch, x_ring3, x_ring4, x_acyl_beta, x_vinyl_beta_f, x_vinyl_beta_hal,
  x_aryl, x_aryl_ortho, x_aryl_hal, x_sp_far, x_total
};
constexpr std::array<std::string_view, x_total> kNames = {
    "base: sp3 carbon", "vinylic or aromatic carbon", "alkynyl or cyano carbon", "acyl carbon",
    "alkyl on the carbon", "C=C, aryl or C#C on the carbon", "C=O on the carbon", "CN or NO2 on the carbon",
    "O on the carbon", "N on the carbon", "S on the carbon", "Si on the carbon", "F on the carbon", "Cl on the carbon",
    "Br on the carbon", "I on the carbon",
    "acyl: carbon on the carbon", "acyl: O or N on the carbon", "acyl: F on the carbon", "acyl: Cl/Br/I on the carbon",
    "vinyl: carbon on the carbon", "vinyl: F on the carbon", "vinyl: Cl/Br/I on the carbon",
    "pair alkyl,alkyl", "pair alkyl,conjugating", "pair alkyl,F", "pair alkyl,Cl/Br/I", "pair F,F", "three F",
    "pair F,Cl/Br/I", "pair Cl/Br/I,Cl/Br/I", "three Cl/Br/I",
    "beta F", "beta Cl/Br/I", "beta O/N", "beta branching", "ring of three", "ring of four",
    "acyl: halogen on the next carbon", "vinyl: F across the double bond", "vinyl: Cl/Br/I across the double bond",
    "aromatic, not vinylic", "aryl: alkyl at ortho", "aryl: halogen at ortho", "halogen at the far end of the triple bond"};

using Counts = std::array<double, x_total>;
using Infos = std::vector<AtomInfo>;

void beta(const Molecule& m, const Infos& info, int i, int b, Counts& n) {
  int carbons = 0;
  for (const auto& e : m.neighbours(b)) {
    if (e.atom == i) continue;
    const int z = m.atom(e.atom).element;
    if (z == element::F) n[x_beta_f] += 1;
    else if (is_halogen(z)) n[x_beta_hal] += 1;
    else if (z == element::O || z == element::N) n[x_beta_o] += 1;
    carbons += info[static_cast<std::size_t>(e.atom)].hybrid == Hybrid::sp3 && z == element::C;
  }
  n[x_beta_branch] += carbons == 3;
}

void saturated(const Molecule& m, const Infos& info, int i, Counts& n) {
  for (const auto& nb : m.neighbours(i)) {
    switch (info[static_cast<std::size_t>(nb.atom)].kind) {
      case Substituent::alkyl:
        n[x_alkyl] += 1;
        beta(m, info, i, nb.atom, n);
        break;
      case Substituent::vinyl: case Substituent::aryl: case Substituent::alkynyl: n[x_conj] += 1; break;
      case Substituent::acyl: case Substituent::carboxyl: n[x_carbonyl] += 1; break;
      case Substituent::cyano: case Substituent::nitro: n[x_cyano] += 1; break;
      case Substituent::oxygen: case Substituent::oxygen_acyl: case Substituent::oxygen_nitro: case Substituent::peroxy: n[x_oxygen] += 1; break;
      case Substituent::nitrogen: case Substituent::nitrogen_acyl: n[x_nitrogen] += 1; break;
      case Substituent::sulfur: case Substituent::sulfinyl: case Substituent::sulfonyl: n[x_sulfur] += 1; break;
      case Substituent::silyl: n[x_silyl] += 1; break;
      case Substituent::fluoro: n[x_f] += 1; break;
      case Substituent::chloro: n[x_cl] += 1; break;
      case Substituent::bromo: n[x_br] += 1; break;
      case Substituent::iodo: n[x_i] += 1; break;
      default: break;
    }
  }
  const double hal = n[x_cl] + n[x_br] + n[x_i];
  const auto two = [](double k) { return k * (k - 1) / 2; };
  n[x_alkyl2] = two(n[x_alkyl]);
  n[x_alkyl_conj] = n[x_alkyl] * (n[x_conj] + n[x_carbonyl] + n[x_cyano]);
  n[x_alkyl_f] = n[x_alkyl] * n[x_f];
  n[x_alkyl_hal] = n[x_alkyl] * hal;
  n[x_f2] = two(n[x_f]);
  n[x_f3] = n[x_f] == 3;
  n[x_f_hal] = n[x_f] * hal;
  n[x_hal2] = two(hal);
  n[x_hal3] = hal == 3;
  const int ring = info[static_cast<std::size_t>(i)].ring;
  n[x_ring3] = ring == 3;
  n[x_ring4] = ring == 4;
}

void acyl(const Molecule& m, int i, Counts& n) {
  for (const auto& nb : m.neighbours(i)) {
    if (m.bond(nb.bond).order != BondOrder::single) continue;
    const int z = m.atom(nb.atom).element;
    if (z == element::F) n[x_acyl_f] += 1;
    else if (is_halogen(z)) n[x_acyl_hal] += 1;
    else if (z == element::O || z == element::N) n[x_acyl_other] += 1;
    else if (z == element::C) n[x_acyl_carbon] += 1;
    for (const auto& e : m.neighbours(nb.atom)) n[x_acyl_beta] += e.atom != i && is_halogen(m.atom(e.atom).element);
  }
}

void vinyl(const Molecule& m, int i, Counts& n) {
  for (const auto& nb : m.neighbours(i)) {
    const int z = m.atom(nb.atom).element;
    if (m.bond(nb.bond).order == BondOrder::single) {
      if (z == element::F) n[x_vinyl_f] += 1;
      else if (is_halogen(z)) n[x_vinyl_hal] += 1;
      else if (z == element::C) n[x_vinyl_carbon] += 1;
      continue;
    }
    for (const auto& e : m.neighbours(nb.atom)) {
      const int far = m.atom(e.atom).element;
      if (e.atom == i) continue;
      n[x_vinyl_beta_f] += far == element::F;
      n[x_vinyl_beta_hal] += far != element::F && is_halogen(far);
    }
  }
}

void ortho(const Molecule& m, const Infos& info, int i, Counts& n) {
  for (const auto& nb : m.neighbours(i)) {
    for (const auto& e : m.neighbours(nb.atom)) {
      if (e.atom == i || m.bond(e.bond).order == BondOrder::aromatic) continue;
      n[x_aryl_ortho] += info[static_cast<std::size_t>(e.atom)].kind == Substituent::alkyl;
      n[x_aryl_hal] += is_halogen(m.atom(e.atom).element);
    }
  }
}

void triple(const Molecule& m, int i, Counts& n) {
  for (const auto& nb : m.neighbours(i)) {
    for (const auto& e : m.neighbours(nb.atom)) n[x_sp_far] += e.atom != i && is_halogen(m.atom(e.atom).element);
  }
}

}  // namespace

const std::vector<std::string_view>& exchange_feature_names() {
  static const std::vector<std::string_view> names(kNames.begin(), kNames.end());
  return names;
}

double exchange_prior(int f) noexcept {
  if (f == x_base) return 1000.0;
  if (f == x_acyl_carbon) return 15.0;  // an acyl group beside formyl
  if (f == x_beta_o) return 4.0;
  return f < x_alkyl2 ? 25.0 : f < x_acyl_beta || f > x_vinyl_beta_hal ? 6.0 : 15.0;
}

std::vector<FeatureCount> exchange_features(const Molecule& m, const Infos& info, int i) {
  Counts n{};
  const auto& a = info[static_cast<std::size_t>(i)];
  n[x_base] = 1;
  if (a.hybrid == Hybrid::aromatic) n[x_sp2] = n[x_aryl] = 1, ortho(m, info, i, n);
  else if (a.carbonyl) n[x_acyl] = 1, acyl(m, i, n);
  else if (a.hybrid == Hybrid::sp2) n[x_sp2] = 1, vinyl(m, i, n);
  else if (a.hybrid == Hybrid::sp) n[x_sp] = 1, triple(m, i, n);
  else saturated(m, info, i, n);
  std::vector<FeatureCount> out;
  out.reserve(8);
  for (int f = 0; f < x_total; ++f) {
    if (n[static_cast<std::size_t>(f)] != 0) out.push_back({f, n[static_cast<std::size_t>(f)]});
  }
  return out;
}

}  // namespace halostep
