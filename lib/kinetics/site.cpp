#include "site.hpp"

#include <algorithm>
#include <bit>

namespace halostep {
namespace {

constexpr double kPlainShare = 0.25, kShare = 0.35, kSharePerGroup = 0.2, kMostShare = 2.0;

constexpr std::array<const char*, kAClasses> kClassNames = {"alkyl",   "alpha-O", "alpha-N/S", "benzylic", "allylic",
                                                            "acyl",    "formate", "cyclopropyl", "unsaturated"};
constexpr std::array<const char*, kPolarGroups> kGroupNames = {
    "F",  "Cl",    "Br",      "I", "O", "O-acyl", "C=O",  "carboxyl",
    "COX", "CN", "NO2", "ONO2", "N", "S", "aryl", "C=C/C#C"};

// The polar group an atom stands for, or -1. Carbonyl and nitro oxygens belong to their carbon or nitrogen.
int group_of(const Molecule& m, const std::vector<AtomInfo>& info, int i) {
  using P = PolarGroup;
  switch (info[static_cast<std::size_t>(i)].kind) {
    case Substituent::fluoro: return static_cast<int>(P::fluorine);
    case Substituent::chloro: return static_cast<int>(P::chlorine);
    case Substituent::bromo: return static_cast<int>(P::bromine);
    case Substituent::iodo: return static_cast<int>(P::iodine);
    case Substituent::oxygen: {
      if (m.degree(i) == 1 && m.atom(i).hydrogens == 0) return -1;  // =O
      return static_cast<int>(P::oxygen);
    }
    case Substituent::peroxy: return static_cast<int>(P::oxygen);
    case Substituent::oxygen_acyl: return m.degree(i) == 1 && m.atom(i).hydrogens == 0 ? -1 : static_cast<int>(P::oxygen_acyl);
    case Substituent::oxygen_nitro: return m.degree(i) >= 2 ? static_cast<int>(P::nitrate) : -1;
    case Substituent::acyl: return static_cast<int>(P::carbonyl);
    case Substituent::carboxyl:
      for (const auto& n : m.neighbours(i)) {
        if (is_halogen(m.atom(n.atom).element)) return static_cast<int>(P::carbonyl_halide);
      }
      return static_cast<int>(P::carboxyl);
    case Substituent::cyano: return static_cast<int>(P::cyano);
    case Substituent::nitro: {
      for (const auto& n : m.neighbours(i)) {
        if (m.atom(n.atom).element == element::O && m.degree(n.atom) == 2) return -1;  // counted at the nitrate oxygen
      }
      return static_cast<int>(P::nitro);
    }
    case Substituent::nitrogen: case Substituent::nitrogen_acyl: return static_cast<int>(P::nitrogen);
    case Substituent::sulfur: case Substituent::sulfinyl: case Substituent::sulfonyl: return static_cast<int>(P::sulfur);
    case Substituent::aryl: return static_cast<int>(P::aryl);
    case Substituent::vinyl: case Substituent::alkynyl: return static_cast<int>(P::unsaturated);
    default: return -1;
  }
}

AClass class_of(const Molecule& m, const std::vector<AtomInfo>& info, int i) {
  const auto& a = info[static_cast<std::size_t>(i)];
  if (a.carbonyl) {
    for (const auto& n : m.neighbours(i)) {
      const auto k = info[static_cast<std::size_t>(n.atom)].kind;
      if (m.bond(n.bond).order == BondOrder::single && (k == Substituent::oxygen_acyl || k == Substituent::nitrogen_acyl)) return AClass::formate;
    }
    return AClass::acyl;
  }
  if (a.hybrid != Hybrid::sp3) return AClass::unsaturated;
  bool oxygen = false, hetero = false, benzyl = false, allyl = false;
  for (const auto& n : m.neighbours(i)) {
    switch (info[static_cast<std::size_t>(n.atom)].kind) {
      case Substituent::aryl: benzyl = true; break;
      case Substituent::vinyl: case Substituent::alkynyl: allyl = true; break;
      case Substituent::oxygen: case Substituent::peroxy: oxygen = true; break;
      case Substituent::oxygen_acyl: case Substituent::oxygen_nitro: break;  // their lone pair is tied up
      case Substituent::nitrogen: case Substituent::sulfur: hetero = true; break;
      default: break;
    }
  }
  if (benzyl) return AClass::benzylic;
  if (allyl) return AClass::allylic;
  if (oxygen) return AClass::alpha_oxygen;
  if (hetero) return AClass::alpha_hetero;
  return a.ring == 3 ? AClass::cyclopropyl : AClass::alkyl;
}

// Four carbons on a carbon.
bool is_quaternary(const Molecule& m, int i) {
  if (m.atom(i).element != element::C || m.degree(i) != 4) return false;
  const auto near = m.neighbours(i);
  return std::all_of(near.begin(), near.end(), [&](const auto& n) { return m.atom(n.atom).element == element::C; });
}

int halogens_on(const Molecule& m, int carbon) {
  int n = 0;
  for (const auto& b : m.neighbours(carbon)) n += is_halogen(m.atom(b.atom).element);
  return n;
}

// Halogens behind the oxygens on the centre: their C-X bonds take up the lone pair that would help the centre.
void see_behind_oxygens(const Molecule& m, const std::vector<AtomInfo>& info, int centre, RateSite& s) {
  for (const auto& n : m.neighbours(centre)) {
    const auto kind = info[static_cast<std::size_t>(n.atom)].kind;
    if (m.bond(n.bond).order != BondOrder::single || (kind != Substituent::oxygen && kind != Substituent::peroxy)) continue;
    ++s.oxygens;
    for (const auto& far : m.neighbours(n.atom)) {
      if (far.atom == centre || m.atom(far.atom).element != element::C) continue;
      s.far_halogens = static_cast<std::uint8_t>(s.far_halogens + halogens_on(m, far.atom));
    }
  }
}

}  // namespace

const char* a_class_name(AClass c) noexcept { return kClassNames[static_cast<std::size_t>(c)]; }
const char* polar_group_name(PolarGroup g) noexcept { return kGroupNames[static_cast<std::size_t>(g)]; }

bool acted_on(const RateSite& s) noexcept {
  if (s.a_class != AClass::alkyl && s.a_class != AClass::cyclopropyl) return true;
  for (auto left = s.present; left != 0; left &= left - 1) {
    const auto& n = s.count[static_cast<std::size_t>(std::countr_zero(left))];
    if (n[0] + n[1] > 0) return true;
  }
  return false;
}

double scatter_share(const RateSite& s) noexcept {
  int groups = 0;
  for (auto left = s.present; left != 0; left &= left - 1) {
    for (const int n : s.count[static_cast<std::size_t>(std::countr_zero(left))]) groups += n;
  }
  const bool plain = groups == 0 && (s.a_class == AClass::alkyl || s.a_class == AClass::cyclopropyl);
  return plain ? kPlainShare : std::min(kMostShare, kShare + kSharePerGroup * groups);
}

RateSite rate_site(const Molecule& m, const std::vector<AtomInfo>& info, int atom) {
  RateSite s;
  s.a_class = class_of(m, info, atom);
  const auto& a = info[static_cast<std::size_t>(atom)];
  s.small_ring = a.ring >= 3 && a.ring <= 5 ? a.ring : 0;
  s.covered = a.hybrid == Hybrid::sp3 || a.carbonyl;
  if (s.a_class == AClass::alpha_oxygen) see_behind_oxygens(m, info, atom, s);
  // Breadth-first over heavy atoms; the ring atoms of an aryl group count once, at their first atom.
  std::array<int, 512> queue;
  std::array<std::int8_t, 512> depth;
  std::vector<bool> seen(static_cast<std::size_t>(m.atom_count()), false);
  std::size_t head = 0, tail = 0;
  queue[tail] = atom;
  depth[tail++] = 0;
  seen[static_cast<std::size_t>(atom)] = true;
  while (head < tail) {
    const int u = queue[head];
    const int d = depth[head++];
    if (d == kPolarReach) break;
    for (const auto& n : m.neighbours(u)) {
      const auto v = static_cast<std::size_t>(n.atom);
      if (seen[v] || tail == queue.size()) continue;
      seen[v] = true;
      if (d == 0) {
        s.carbons += m.atom(n.atom).element == element::C;
        s.covered = s.covered && info[v].kind != Substituent::unknown;
        s.quaternary = static_cast<std::uint8_t>(s.quaternary + is_quaternary(m, n.atom));
      }
      queue[tail] = n.atom;
      depth[tail++] = static_cast<std::int8_t>(d + 1);
      const int g = group_of(m, info, n.atom);
      if (g < 0) continue;
      const bool chain = g == static_cast<int>(PolarGroup::aryl) || g == static_cast<int>(PolarGroup::unsaturated);
      if (chain && group_of(m, info, u) == g) continue;
      ++s.count[static_cast<std::size_t>(g)][static_cast<std::size_t>(d)];
      s.present |= 1U << static_cast<unsigned>(g);
    }
  }
  return s;
}

}  // namespace halostep
