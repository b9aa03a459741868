#include "features.hpp"

#include <algorithm>
#include <array>
#include <bit>

#include "untyped.hpp"

namespace halostep {
namespace {

enum F : int {
  // base values
  base_sp3, base_vinyl, base_aryl, base_alkynyl, base_acyl, base_alcohol, base_phenol, base_acid, base_hydroperoxide,
  base_amine, base_aniline, base_amide, base_n_aromatic, base_thiol, base_thiophenol, base_si,
  // substituents on an sp3 carbon
  s_first, s_alkyl, s_vinyl, s_aryl, s_alkynyl, s_acyl, s_carboxyl, s_cyano, s_nitro, s_o, s_o_acyl, s_o_nitro, s_peroxy, s_n,
  s_n_acyl, s_s, s_so, s_so2, s_si, s_f, s_cl, s_br, s_i,
  // pairs at the centre
  p_alkyl_alkyl, p_conj_alkyl, p_pi_alkyl, p_conj_conj, p_weak_conj, p_aryl_twist, p_o_conj, p_n_conj, p_conj_halogen, p_donor_alkyl, p_donor_donor,
  p_donor_halogen, p_f_alkyl, p_hal_alkyl, p_f_f, p_f_hal, p_hal_hal,
  // beyond the first atom
  b_f, b_cl, b_o, b_conj, b_branch, g_f, n_more_alkyl, aryl_halogen,
  vinyl_extended, allyl_end_alkyl, allyl_mid_alkyl, aryl_fused, aryl_flat, aryl_hetero5,
  // rings
  ring3, ring4, ring5, ring5_conj_pair, bridge_one, bridgehead5, bridgehead6, on_ring3,
  // other carbon centres
  v_alkyl, v_conj, v_f, v_halogen, v_ring, a_hetero5, a_f, a_ring_n, k_alkyl, f_alkyl, f_conj, f_donor, f_o, f_n, f_f, f_hal, f_alpha_halogen,
  // O, N, S, Si
  o_alkyl, o_peracid, ph_alkyl, ph_ortho_tbu, ph_donor, n_alkyl, n_aryl_alkyl, n_fluoro, n_ring, t_alkyl, si_alkyl, si_aryl, si_si, si_f, si_cl,
  feature_total
};

constexpr std::array<std::string_view, feature_total> kFeatureNames = {
    "base: C-H, sp3", "base: C-H, vinyl", "base: C-H, aryl", "base: C-H, alkynyl", "base: C-H, acyl",
    "base: O-H, alcohol", "base: O-H, phenol", "base: O-H, acid", "base: O-H, hydroperoxide", "base: N-H, amine",
    "base: N-H, aniline", "base: N-H, amide", "base: N-H, aromatic ring", "base: S-H, thiol", "base: S-H, thiophenol",
    "base: Si-H",
    "first substituent", "alkyl", "vinyl", "aryl", "alkynyl", "acyl", "carboxyl, beyond acyl", "cyano", "nitro", "O", "O-acyl, beyond O", "O-nitro, beyond O", "peroxy, beyond O", "N",
    "N-acyl, beyond N", "S", "SO", "SO2", "Si", "F", "Cl", "Br", "I",
    "pair alkyl,alkyl", "pair conjugating,alkyl", "pair C=C or C#C,alkyl", "pair of C=C, aryl, C#C, or of one with N/S", "pair with C=O, CN, NO2", "pair aryl,aryl or C=C or C=O, free to twist", "pair O,conjugating", "pair N/S,conjugating, beyond that",
    "pair conjugating,halogen", "pair donor,alkyl", "pair donor,donor", "pair donor,halogen", "pair F,alkyl",
    "pair Cl/Br/I,alkyl", "pair F,F", "pair F,Cl/Br/I", "pair Cl/Br/I,Cl/Br/I",
    "beta F", "beta Cl/Br/I", "beta O/N", "beta conjugating group", "beta branching", "gamma F", "further alkyl on the N", "halogen at para of the aryl group",
    "longer conjugation", "alkyl on the far end of the allyl system", "alkyl on the middle of the allyl system",
    "second aromatic ring on the aryl group", "aryl group held flat by a ring", "five-membered heteroaryl",
    "three-membered ring", "four-membered ring", "five-membered ring", "two conjugating groups held in a five-membered ring", "bridge of one atom in a ring of five or less",
    "bridgehead in a ring of five or less", "bridgehead in a ring of six or more", "cyclopropyl on the centre",
    "vinyl C-H: alkyl on the carbon", "vinyl C-H: conjugating group on the carbon", "vinyl C-H: F on the carbon", "vinyl C-H: Cl/Br/I on the carbon", "vinyl C-H: small ring",
    "aryl C-H: five-membered heteroaryl", "aryl C-H: F on the ring", "aryl C-H: beside ring N", "alkynyl C-H: alkyl", "acyl C-H: alkyl",
    "acyl C-H: conjugating group", "acyl C-H: O/N/F", "acyl C-H: O, beyond O/N/F", "acyl C-H: N, beyond O/N/F", "acyl C-H: F, beyond O/N/F", "acyl C-H: Cl/Br/I",
    "acyl C-H: alpha halogen",
    "O-H: alkyl on the carbon", "O-H: peracid", "phenol: alkyl on the ring", "phenol: tertiary alkyl at ortho", "phenol: O/N on the ring",
    "N-H: alkyl", "N-H: alkyl beside aryl or acyl", "N-H: halogen", "N-H: second ring N", "S-H: alkyl on the carbon", "Si-H: alkyl",
    "Si-H: aryl", "Si-H: Si", "Si-H: F", "Si-H: Cl/Br/I"};

constexpr std::array<const char*, static_cast<int>(CentreType::unknown) + 1> kCentreNames = {
    "C-H, sp3", "C-H, vinyl", "C-H, aryl", "C-H, alkynyl", "C-H, acyl", "O-H, alcohol", "O-H, phenol", "O-H, acid",
    "O-H, hydroperoxide", "N-H, amine", "N-H, aniline", "N-H, amide", "N-H, aromatic ring", "S-H, thiol",
    "S-H, thiophenol", "Si-H", "unknown"};

constexpr double kPlainShare = 0.4;

bool conjugating(Substituent s) {
  return s == Substituent::vinyl || s == Substituent::aryl || s == Substituent::alkynyl || s == Substituent::acyl ||
         s == Substituent::carboxyl || s == Substituent::cyano || s == Substituent::nitro;
}
bool donor(Substituent s) {
  return s == Substituent::oxygen || s == Substituent::oxygen_acyl || s == Substituent::nitrogen ||
         s == Substituent::nitrogen_acyl || s == Substituent::sulfur || s == Substituent::peroxy ||
         s == Substituent::oxygen_nitro;
}
bool heavy_halogen(Substituent s) {
  return s == Substituent::chloro || s == Substituent::bromo || s == Substituent::iodo;
}

// A bridgehead cannot flatten. An atom at which two rings are fused can: another such atom stands beside it.
bool bridgehead(const Molecule& m, const std::vector<AtomInfo>& info, int atom) {
  const auto& a = info[static_cast<std::size_t>(atom)];
  if (a.ring_bonds < 3) return false;
  bool fused = false;
  for (const auto& n : m.neighbours(atom)) {
    fused = fused || (m.bond(n.bond).in_ring && info[static_cast<std::size_t>(n.atom)].ring_bonds >= 3);
  }
  return !fused || a.ring <= 4;
}

class Builder {
 public:
  Builder(const Molecule& m, const std::vector<AtomInfo>& info, int centre) : m_(m), info_(info), c_(centre) {}

  SiteFeatures build();

 private:
  const AtomInfo& at(int i) const { return info_[static_cast<std::size_t>(i)]; }
  void add(int f, double n = 1.0) {
    if (n == 0.0) return;
    const auto k = static_cast<std::size_t>(f);
    counts_[k] += n;
    used_[k / 64] |= std::uint64_t{1} << k % 64;
  }
  void refuse(const char* why) { if (out_.not_covered == nullptr) out_.not_covered = why; }
  void sp3();
  void pairs();
  void rings();
  void beta(int b);
  void conjugation(int nb);
  void far_end(int nb);
  void aromatic_group(int nb);
  [[nodiscard]] int alkyl_count(int i) const;
  void vinyl();
  void aryl();
  void acyl();
  void oxygen();
  [[nodiscard]] std::vector<int> ortho_and_para(int x) const;
  [[nodiscard]] std::vector<int> opposite(int x) const;
  [[nodiscard]] std::vector<std::pair<int, int>> aromatic_shells(int x) const;
  void nitrogen();
  void sulfur();
  void silicon();

  const Molecule& m_;
  const std::vector<AtomInfo>& info_;
  int c_;
  SiteFeatures out_;
  std::array<double, feature_total> counts_{};
  std::array<std::uint64_t, feature_total / 64 + 1> used_{};  // bit f: counts_[f] was touched
  std::array<int, kSubstituentKinds> kinds_{};
};

int base_substituent(Substituent s) {
  return s_alkyl + static_cast<int>(s) - static_cast<int>(Substituent::alkyl);
}
// A group that varies another: it counts as that one, and its own value is the difference.
int parent_group(Substituent s) {
  switch (s) {
    case Substituent::carboxyl: return s_acyl;
    case Substituent::oxygen_acyl: case Substituent::oxygen_nitro: case Substituent::peroxy: return s_o;
    case Substituent::nitrogen_acyl: return s_n;
    default: return -1;
  }
}

// sp3 carbons on an atom, the centre apart.
int Builder::alkyl_count(int i) const {
  int count = 0;
  for (const auto& n : m_.neighbours(i)) count += n.atom != c_ && at(n.atom).kind == Substituent::alkyl;
  return count;
}

// What stands on the other end of the allyl or propargyl system shares the odd electron.
void Builder::far_end(int nb) {
  for (const auto& n : m_.neighbours(nb)) {
    const auto order = m_.bond(n.bond).order;
    if (n.atom == c_) continue;
    if (order != BondOrder::dbl && order != BondOrder::triple) {
      if (at(n.atom).kind == Substituent::alkyl && !m_.bond(n.bond).in_ring) add(allyl_mid_alkyl);
      continue;
    }
    for (const auto& e : m_.neighbours(n.atom)) {
      if (e.atom == nb) continue;
      if (conjugating(at(e.atom).kind)) add(vinyl_extended);
      else if (at(e.atom).kind == Substituent::alkyl && e.atom != c_) add(allyl_end_alkyl);
    }
  }
}

void Builder::aromatic_group(int nb) {
  bool hetero = false;
  const auto rings = [&](int i) {
    int aromatic = 0;
    for (const auto& n : m_.neighbours(i)) aromatic += m_.bond(n.bond).order == BondOrder::aromatic;
    return aromatic >= 3;  // an atom of two aromatic rings
  };
  int fused = 0;
  for (const auto& n : m_.neighbours(nb)) {
    if (m_.bond(n.bond).order != BondOrder::aromatic) continue;
    if (m_.atom(n.atom).element != element::C) hetero = hetero || at(n.atom).ring == 5;
    fused += rings(n.atom);
  }
  if (hetero) add(aryl_hetero5);
  add(aryl_fused, fused + (rings(nb) ? 1 : 0));
  for (const int p : opposite(nb)) {
    for (const auto& x : m_.neighbours(p)) add(aryl_halogen, is_halogen(m_.atom(x.atom).element));
  }
}

void Builder::conjugation(int nb) {
  const auto kind = at(nb).kind;
  if (kind == Substituent::vinyl || kind == Substituent::alkynyl) far_end(nb);
  else if (kind == Substituent::aryl) aromatic_group(nb);
}

void Builder::beta(int b) {
  int branch = 0;
  for (const auto& n : m_.neighbours(b)) {
    if (n.atom == c_ || m_.bond_between(c_, n.atom) >= 0) continue;  // in a ring of three it is on the centre itself
    const auto k = at(n.atom).kind;
    if (k == Substituent::fluoro) add(b_f);
    else if (heavy_halogen(k)) add(b_cl);
    else if (donor(k)) add(b_o);
    else if (conjugating(k)) add(b_conj);
    else if (k == Substituent::alkyl) {
      ++branch;
      for (const auto& g : m_.neighbours(n.atom)) {
        if (g.atom != b && at(g.atom).kind == Substituent::fluoro) add(g_f);
      }
    }
  }
  if (branch == 3) add(b_branch);
  if (at(b).ring == 3 && at(c_).ring != 3) add(on_ring3);
}

void Builder::pairs() {
  const auto n = [&](Substituent s) { return kinds_[static_cast<std::size_t>(s)]; };
  const int alkyl = n(Substituent::alkyl), fluor = n(Substituent::fluoro);
  const int aryl = n(Substituent::aryl);
  int conj = 0, don = 0, hal = 0;
  for (int k = 0; k < kSubstituentKinds; ++k) {
    const auto s = static_cast<Substituent>(k);
    const int c = kinds_[static_cast<std::size_t>(k)];
    conj += conjugating(s) ? c : 0;
    don += donor(s) ? c : 0;
    hal += heavy_halogen(s) ? c : 0;
  }
  const auto two = [](int k) { return k * (k - 1) / 2.0; };
  add(p_alkyl_alkyl, two(alkyl));
  add(p_conj_alkyl, conj * alkyl);
  add(p_pi_alkyl, (n(Substituent::vinyl) + n(Substituent::alkynyl)) * alkyl);
  // Each of several groups has its share of the odd electron, and what stands on it acts by that share.
  if (conj > 1) {
    for (const int f : {vinyl_extended, allyl_end_alkyl, allyl_mid_alkyl, aryl_fused, aryl_halogen}) counts_[static_cast<std::size_t>(f)] /= conj;
  }
  const int pi = n(Substituent::vinyl) + n(Substituent::alkynyl) + aryl;
  add(p_conj_conj, two(pi));
  add(p_weak_conj, two(conj) - two(pi));
  // Two groups need the same plane; an aryl group that is not held there by a ring turns out of it.
  int free_aryl = aryl;
  for (const auto& nb : m_.neighbours(c_)) free_aryl -= at(nb.atom).kind == Substituent::aryl && m_.bond(nb.bond).in_ring;
  add(aryl_flat, aryl - free_aryl);
  const int flat = aryl + n(Substituent::vinyl) + n(Substituent::acyl) + n(Substituent::carboxyl);
  add(p_aryl_twist, two(flat) - two(flat - free_aryl));
  const int oxygens = n(Substituent::oxygen) + n(Substituent::oxygen_acyl) + n(Substituent::oxygen_nitro) + n(Substituent::peroxy);
  add(p_o_conj, conj * oxygens);
  // N and S stabilise nearly as much as a pi system: such a pair saturates likewise, and its own value is the difference.
  add(p_conj_conj, pi * (don - oxygens));
  add(p_n_conj, conj * (don - oxygens));
  add(p_conj_halogen, conj * (hal + fluor));
  add(p_donor_alkyl, don * alkyl);
  add(p_donor_donor, two(don));
  add(p_donor_halogen, don * (hal + fluor));
  add(p_f_alkyl, fluor * alkyl);
  add(p_hal_alkyl, hal * alkyl);
  add(p_f_f, two(fluor));
  add(p_f_hal, fluor * hal);
  add(p_hal_hal, two(hal));
}

void Builder::rings() {
  const auto& a = at(c_);
  if (bridgehead(m_, info_, c_)) {
    add(a.ring <= 5 ? bridgehead5 : bridgehead6);
    if (a.ring <= 4) refuse("a bridgehead in a three- or four-membered ring");
    return;
  }
  int conjugated = 0, bridgeheads = 0;
  for (const auto& n : m_.neighbours(c_)) {
    if (!m_.bond(n.bond).in_ring) continue;
    conjugated += conjugating(at(n.atom).kind);
    bridgeheads += bridgehead(m_, info_, n.atom);
  }
  // In cyclopentadiene the far ends of the two groups are one another's: no longer system.
  if (conjugated >= 2 && a.ring == 5) counts_[vinyl_extended] = 0;
  if (bridgeheads == 2 && a.ring <= 5) add(bridge_one);
  if (a.ring == 3) add(ring3);
  else if (a.ring == 4) conjugated > 0 ? refuse("an allylic or benzylic C-H in a four-membered ring") : add(ring4);
  else if (a.ring == 5) add(conjugated >= 2 ? ring5_conj_pair : ring5, conjugated == 1 ? 0.0 : 1.0);
}

void Builder::sp3() {
  add(base_sp3);
  for (const auto& n : m_.neighbours(c_)) {
    const auto k = at(n.atom).kind;
    if (k == Substituent::unknown) {
      refuse(unknown_substituent(m_.atom(n.atom).element));
      continue;
    }
    ++kinds_[static_cast<std::size_t>(k)];
    add(base_substituent(k));
    if (const int parent = parent_group(k); parent >= 0) add(parent);
    if (k == Substituent::nitrogen) add(n_more_alkyl, alkyl_count(n.atom));
    if (k == Substituent::alkyl) beta(n.atom);
    conjugation(n.atom);
  }
  // The first group on methane takes most of what a group takes; what follows is the difference between groups.
  if (m_.degree(c_) > 0) add(s_first);
  pairs();
  if (m_.atom(c_).in_ring) rings();
}

void Builder::vinyl() {
  add(base_vinyl);
  for (const auto& n : m_.neighbours(c_)) {
    if (m_.bond(n.bond).order == BondOrder::dbl) {
      if (at(n.atom).hybrid == Hybrid::sp) refuse("a C-H on a cumulated double bond");
      continue;
    }
    const auto k = at(n.atom).kind;
    if (k == Substituent::alkyl) add(v_alkyl);
    else if (conjugating(k)) add(v_conj);
    else if (k == Substituent::fluoro) add(v_f);
    else if (heavy_halogen(k)) add(v_halogen);
    else refuse("a vinylic C-H next to this group");
  }
  if (at(c_).ring == 3) refuse("a vinylic C-H in a three-membered ring");
  if (at(c_).ring == 4) add(v_ring);
}

void Builder::aryl() {
  add(base_aryl);
  if (at(c_).ring == 5) add(a_hetero5);
  for (const auto& n : m_.neighbours(c_)) {
    if (m_.atom(n.atom).element == element::N) add(a_ring_n);
    for (const auto& e : m_.neighbours(n.atom)) {
      if (e.atom != c_ && at(e.atom).kind == Substituent::fluoro) add(a_f);
    }
  }
}

void Builder::acyl() {
  add(base_acyl);
  for (const auto& n : m_.neighbours(c_)) {
    if (m_.bond(n.bond).order == BondOrder::dbl) continue;
    const auto k = at(n.atom).kind;
    if (k == Substituent::alkyl) {
      add(f_alkyl);
      for (const auto& b : m_.neighbours(n.atom)) {
        if (is_halogen(m_.atom(b.atom).element)) add(f_alpha_halogen);
      }
    } else if (conjugating(k)) add(f_conj);
    else if (k == Substituent::oxygen_acyl || k == Substituent::oxygen) add(f_donor), add(f_o);
    else if (k == Substituent::nitrogen_acyl || k == Substituent::nitrogen) add(f_donor), add(f_n);
    else if (k == Substituent::fluoro) add(f_donor), add(f_f);
    else if (heavy_halogen(k)) add(f_hal);
    else refuse("a formyl C-H next to this group");
  }
}

void Builder::oxygen() {
  if (m_.degree(c_) == 0) return refuse("water");
  const int x = m_.neighbours(c_)[0].atom;
  const int z = m_.atom(x).element;
  if (z == element::O) {
    out_.centre = CentreType::o_hydroperoxide;
    for (const auto& n : m_.neighbours(x)) {
      if (n.atom != c_ && at(n.atom).carbonyl) add(o_peracid);
    }
    return add(base_hydroperoxide);
  }
  if (z != element::C) return refuse("an O-H on this element");
  if (at(x).carbonyl) {
    out_.centre = CentreType::o_acid;
    return add(base_acid);
  }
  if (at(x).hybrid == Hybrid::sp3) {
    out_.centre = CentreType::o_alcohol;
    add(base_alcohol);
    for (const auto& n : m_.neighbours(x)) {
      if (n.atom != c_ && m_.atom(n.atom).element == element::C) add(o_alkyl);
    }
    return;
  }
  if (at(x).hybrid != Hybrid::aromatic) return refuse("an enol O-H");
  out_.centre = CentreType::o_phenol;
  add(base_phenol);
  for (const int ring : ortho_and_para(x)) {
    for (const auto& s : m_.neighbours(ring)) {
      if (m_.bond(s.bond).in_ring && m_.bond(s.bond).order == BondOrder::aromatic) continue;
      if (donor(at(s.atom).kind)) add(ph_donor);
      if (at(s.atom).kind != Substituent::alkyl) continue;
      int carbons = 0;
      for (const auto& e : m_.neighbours(s.atom)) carbons += m_.atom(e.atom).element == element::C;
      add(carbons == 4 ? ph_ortho_tbu : ph_alkyl);
    }
  }
}

// Atoms of the aromatic system around `x` by their distance from it, up to three bonds.
std::vector<std::pair<int, int>> Builder::aromatic_shells(int x) const {
  std::vector<int> depth(static_cast<std::size_t>(m_.atom_count()), -1), queue = {x};
  std::vector<std::pair<int, int>> out;
  depth[static_cast<std::size_t>(x)] = 0;
  for (std::size_t head = 0; head < queue.size(); ++head) {
    const int u = queue[head], d = depth[static_cast<std::size_t>(u)];
    if (d > 0) out.emplace_back(d, u);
    if (d == 3) continue;
    for (const auto& n : m_.neighbours(u)) {
      auto& seen = depth[static_cast<std::size_t>(n.atom)];
      if (seen >= 0 || m_.bond(n.bond).order != BondOrder::aromatic) continue;
      seen = d + 1;
      queue.push_back(n.atom);
    }
  }
  return out;
}

// One or three bonds from `x`: where a substituent meets the odd electron.
std::vector<int> Builder::ortho_and_para(int x) const {
  std::vector<int> out;
  for (const auto& [d, atom] : aromatic_shells(x)) {
    if (d % 2 == 1) out.push_back(atom);
  }
  return out;
}

// Para positions: three bonds from `x` in its own ring.
std::vector<int> Builder::opposite(int x) const {
  std::vector<int> out;
  if (at(x).ring != 6) return out;
  for (const auto& [d, atom] : aromatic_shells(x)) {
    if (d == 3 && at(atom).ring == 6) out.push_back(atom);
  }
  return out;
}

void Builder::nitrogen() {
  if (at(c_).hybrid == Hybrid::aromatic) {
    out_.centre = CentreType::n_aromatic;
    add(base_n_aromatic);
    for (const auto& n : m_.neighbours(c_)) {
      for (const auto& e : m_.neighbours(n.atom)) {
        if (e.atom != c_ && m_.atom(e.atom).element == element::N) add(n_ring);
      }
    }
    return;
  }
  if (at(c_).hybrid != Hybrid::sp3 || m_.atom(c_).charge != 0) return refuse("an N-H on a doubly bonded or charged nitrogen");
  bool aryl_on = false, acyl_on = false;
  int alkyls = 0, others = 0;
  for (const auto& n : m_.neighbours(c_)) {
    const int z = m_.atom(n.atom).element;
    if (z == element::C && at(n.atom).carbonyl) acyl_on = true;
    else if (z == element::C && at(n.atom).hybrid == Hybrid::aromatic) aryl_on = true;
    else if (z == element::C && at(n.atom).hybrid == Hybrid::sp3) ++alkyls;
    else if (is_halogen(z)) add(n_fluoro);
    else ++others;
  }
  if (others > 0) return refuse("an N-H next to this group");
  out_.centre = acyl_on ? CentreType::n_amide : aryl_on ? CentreType::n_aniline : CentreType::n_amine;
  add(acyl_on ? base_amide : aryl_on ? base_aniline : base_amine);
  add(acyl_on || aryl_on ? n_aryl_alkyl : n_alkyl, alkyls);
}

void Builder::sulfur() {
  if (m_.degree(c_) == 0) return refuse("hydrogen sulfide");
  const int x = m_.neighbours(c_)[0].atom;
  if (m_.atom(x).element != element::C) return refuse("an S-H on this element");
  const bool ar = at(x).hybrid == Hybrid::aromatic;
  if (!ar && at(x).hybrid != Hybrid::sp3) return refuse("an S-H on this carbon");
  out_.centre = ar ? CentreType::s_thiophenol : CentreType::s_thiol;
  add(ar ? base_thiophenol : base_thiol);
}

void Builder::silicon() {
  out_.centre = CentreType::si;
  add(base_si);
  for (const auto& n : m_.neighbours(c_)) {
    const auto k = at(n.atom).kind;
    if (k == Substituent::alkyl) add(si_alkyl);
    else if (k == Substituent::aryl) add(si_aryl);
    else if (k == Substituent::silyl) add(si_si);
    else if (k == Substituent::fluoro) add(si_f);
    else if (heavy_halogen(k)) add(si_cl);
    else refuse("an Si-H next to this group");
  }
}

SiteFeatures Builder::build() {
  const auto& a = m_.atom(c_);
  const auto h = at(c_).hybrid;
  if (a.charge != 0) refuse("a charged centre");
  switch (a.element) {
    case element::C:
      if (h == Hybrid::sp3) out_.centre = CentreType::c_sp3, sp3();
      else if (h == Hybrid::aromatic) out_.centre = CentreType::c_aryl, aryl();
      else if (at(c_).carbonyl && h == Hybrid::sp2) out_.centre = CentreType::c_acyl, acyl();
      else if (at(c_).kind == Substituent::vinyl && h == Hybrid::sp2) out_.centre = CentreType::c_vinyl, vinyl();
      else if (at(c_).kind == Substituent::alkynyl) {
        out_.centre = CentreType::c_alkynyl;
        add(base_alkynyl);
        for (const auto& n : m_.neighbours(c_)) {
          for (const auto& e : m_.neighbours(n.atom)) add(k_alkyl, e.atom != c_ && at(e.atom).kind == Substituent::alkyl);
        }
      } else refuse("a C-H on this kind of carbon");
      break;
    case element::O: oxygen(); break;
    case element::N: nitrogen(); break;
    case element::S: sulfur(); break;
    case element::Si: silicon(); break;
    default: refuse("an X-H bond of this element");
  }
  out_.features.reserve(8);
  for (std::size_t w = 0; w < used_.size(); ++w) {
    for (auto bits = used_[w]; bits != 0; bits &= bits - 1) {
      const std::size_t f = 64 * w + static_cast<std::size_t>(std::countr_zero(bits));
      if (counts_[f] != 0.0) out_.features.push_back({static_cast<int>(f), counts_[f]});
    }
  }
  return std::move(out_);
}

}  // namespace

const char* centre_name(CentreType t) noexcept { return kCentreNames[static_cast<std::size_t>(t)]; }

const std::vector<std::string_view>& feature_names() {
  static const std::vector<std::string_view> names(kFeatureNames.begin(), kFeatureNames.end());
  return names;
}

double feature_prior(int f) noexcept {
  switch (f) {
    // Differences between kindred groups.
    case s_carboxyl: case s_o_acyl: case s_o_nitro: case s_peroxy: case s_n_acyl: return 10.0;
    case f_n: return 12.0;
    case f_o: case f_f: return 15.0;
    case b_conj: return 2.5;                   // no allylic or benzylic resonance reaches it
    // Two conjugating groups, or one and a donor, saturate: larger than other pairs.
    case p_conj_conj: case p_aryl_twist: case p_o_conj: case p_n_conj: return 15.0;
    // Single rows stand behind these; they must not turn one bond into a rule for all.
    case ph_alkyl: case ph_ortho_tbu: case ph_donor: return 8.0;
    case a_ring_n: case v_alkyl: case v_conj: case v_f: case v_halogen: case f_alkyl: case f_conj: case k_alkyl: return 15.0;
    default: break;
  }
  if (f <= base_si) return 1000.0;             // bases are free
  if (f <= s_i) return 25.0;                   // substituents
  if (f <= p_hal_hal) return 8.0;                 // pairs
  if (f <= aryl_halogen) return 5.0;           // beta and gamma effects
  if (f <= allyl_mid_alkyl) return 12.0;
  return 20.0;
}

double scatter_share(const std::vector<FeatureCount>& f) noexcept {
  const bool plain = std::all_of(f.begin(), f.end(), [](const FeatureCount& c) {
    return c.feature == base_sp3 || c.feature == s_first || c.feature == s_alkyl || c.feature == p_alkyl_alkyl || c.feature == b_branch;
  });
  return plain ? kPlainShare : 1.0;
}

SiteFeatures site_features(const Molecule& m, const std::vector<AtomInfo>& info, int i) {
  return Builder(m, info, i).build();
}

std::string_view site_type(const Molecule& m, const std::vector<AtomInfo>& info, int i) {
  static constexpr std::array<std::string_view, 4> kPlain = {"methane C-H", "primary C-H", "secondary C-H", "tertiary C-H"};
  static constexpr std::array<std::string_view, 4> kBenzylic = {"benzylic C-H", "benzylic C-H, primary", "benzylic C-H, secondary", "benzylic C-H, tertiary"};
  static constexpr std::array<std::string_view, 4> kAllylic = {"allylic C-H", "allylic C-H, primary", "allylic C-H, secondary", "allylic C-H, tertiary"};
  static constexpr std::array<std::string_view, 4> kPropargylic = {"propargylic C-H", "propargylic C-H, primary", "propargylic C-H, secondary", "propargylic C-H, tertiary"};
  const auto at = [&](int k) -> const AtomInfo& { return info[static_cast<std::size_t>(k)]; };
  const auto f = site_features(m, info, i);
  if (f.centre == CentreType::unknown) return untyped_name(m.atom(i).element);
  if (f.centre != CentreType::c_sp3) return centre_name(f.centre);
  std::size_t carbons = 0;
  bool vin = false, ar = false, alkyn = false, carbonyl = false, cyan = false, o = false, n = false, s = false, hal = false, other = false;
  for (const auto& nb : m.neighbours(i)) {
    carbons += m.atom(nb.atom).element == element::C;
    switch (at(nb.atom).kind) {
      case Substituent::vinyl: vin = true; break;
      case Substituent::aryl: ar = true; break;
      case Substituent::alkynyl: alkyn = true; break;
      case Substituent::acyl: case Substituent::carboxyl: carbonyl = true; break;
      case Substituent::cyano: cyan = true; break;
      case Substituent::oxygen: case Substituent::oxygen_acyl: case Substituent::oxygen_nitro: case Substituent::peroxy: o = true; break;
      case Substituent::nitrogen: case Substituent::nitrogen_acyl: case Substituent::nitro: n = true; break;
      case Substituent::sulfur: case Substituent::sulfinyl: case Substituent::sulfonyl: s = true; break;
      case Substituent::fluoro: case Substituent::chloro: case Substituent::bromo: case Substituent::iodo: hal = true; break;
      case Substituent::alkyl: break;
      default: other = true;
    }
  }
  if (ar) return kBenzylic[std::min<std::size_t>(carbons, 3)];
  if (vin) return kAllylic[std::min<std::size_t>(carbons, 3)];
  if (alkyn) return kPropargylic[std::min<std::size_t>(carbons, 3)];
  if (carbonyl) return "C-H alpha to C=O";
  if (cyan) return "C-H alpha to CN";
  if (o) return "C-H alpha to O";
  if (n) return "C-H alpha to N";
  if (s) return "C-H alpha to S";
  if (hal) return "C-H alpha to halogen";
  if (other) return "C-H, other substituent";
  if (bridgehead(m, info, i)) return "bridgehead C-H";
  if (at(i).ring == 3) return "cyclopropyl C-H";
  if (at(i).ring == 4) return "cyclobutyl C-H";
  return kPlain[std::min<std::size_t>(carbons, 3)];
}

}  // namespace halostep
