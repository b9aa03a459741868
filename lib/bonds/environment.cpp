#include "environment.hpp"

#include <algorithm>
#include <array>

namespace halostep {
namespace {

constexpr std::array<const char*, kSubstituentKinds> kNames = {
    "alkyl",  "vinyl",    "aryl",          "alkynyl", "acyl",     "carboxyl", "cyano",  "nitro",
    "O",      "O-acyl",   "O-nitro",       "peroxy",  "N",        "N-acyl",   "S",      "SO",
    "SO2",    "Si",       "F",             "Cl",      "Br",       "I",        "unknown"};

bool double_to(const Molecule& m, int i, int z) {
  for (const auto& n : m.neighbours(i)) {
    if (m.bond(n.bond).order == BondOrder::dbl && m.atom(n.atom).element == z) return true;
  }
  return false;
}

Hybrid hybrid_of(const Molecule& m, int i) {
  if (m.atom(i).aromatic) return Hybrid::aromatic;
  int doubles = 0, triples = 0;
  for (const auto& n : m.neighbours(i)) {
    doubles += m.bond(n.bond).order == BondOrder::dbl;
    triples += m.bond(n.bond).order == BondOrder::triple;
  }
  if (triples > 0 || doubles > 1) return Hybrid::sp;
  return doubles == 1 ? Hybrid::sp2 : Hybrid::sp3;
}

Substituent carbon_kind(const Molecule& m, int i, Hybrid h) {
  if (h == Hybrid::aromatic) return Substituent::aryl;
  if (h == Hybrid::sp3) return Substituent::alkyl;
  if (double_to(m, i, element::O)) {
    for (const auto& n : m.neighbours(i)) {
      const int z = m.atom(n.atom).element;
      if (m.bond(n.bond).order == BondOrder::single && (z == element::O || z == element::N || is_halogen(z))) {
        return Substituent::carboxyl;
      }
    }
    return Substituent::acyl;
  }
  for (const auto& n : m.neighbours(i)) {
    const auto order = m.bond(n.bond).order;
    const int z = m.atom(n.atom).element;
    if (order == BondOrder::triple) return z == element::C ? Substituent::alkynyl : z == element::N ? Substituent::cyano : Substituent::unknown;
    if (order == BondOrder::dbl && z != element::C) return Substituent::unknown;
  }
  return Substituent::vinyl;
}

Substituent oxygen_kind(const Molecule& m, int i) {
  for (const auto& n : m.neighbours(i)) {
    const int z = m.atom(n.atom).element;
    if (z == element::O) return Substituent::peroxy;
    if (z == element::C && double_to(m, n.atom, element::O)) return Substituent::oxygen_acyl;
    if (z == element::N && (double_to(m, n.atom, element::O) || m.atom(n.atom).charge != 0)) return Substituent::oxygen_nitro;
    if ((z == element::S || z == element::P) && double_to(m, n.atom, element::O)) return Substituent::unknown;
    if (z != element::C && z != element::O && z != element::N && z != element::S) return Substituent::unknown;
  }
  return Substituent::oxygen;
}

Substituent nitrogen_kind(const Molecule& m, int i, Hybrid h) {
  int oxygens = 0;
  bool acyl = false, odd = h == Hybrid::sp;
  for (const auto& n : m.neighbours(i)) {
    const int z = m.atom(n.atom).element;
    oxygens += z == element::O;
    odd = odd || z == element::N || is_halogen(z) || z == element::S;
    if (z == element::C && double_to(m, n.atom, element::O)) acyl = true;
  }
  if (oxygens == 2 && m.degree(i) == 3) return Substituent::nitro;
  if (h == Hybrid::aromatic) return Substituent::nitrogen_acyl;  // pyrrole-type N: lone pair tied up likewise
  if (h == Hybrid::sp2 || odd || oxygens > 0 || m.atom(i).charge != 0) return Substituent::unknown;
  return acyl ? Substituent::nitrogen_acyl : Substituent::nitrogen;
}

Substituent sulfur_kind(const Molecule& m, int i) {
  int oxygens = 0;
  for (const auto& n : m.neighbours(i)) {
    const int z = m.atom(n.atom).element;
    if (z == element::O && m.degree(n.atom) == 1 && m.atom(n.atom).hydrogens == 0) ++oxygens;
    else if (z != element::C && z != element::H) return Substituent::unknown;
  }
  return oxygens == 0 ? Substituent::sulfur : oxygens == 1 ? Substituent::sulfinyl : Substituent::sulfonyl;
}

Substituent kind_of(const Molecule& m, int i, Hybrid h) {
  switch (m.atom(i).element) {
    case element::C: return carbon_kind(m, i, h);
    case element::O: return oxygen_kind(m, i);
    case element::N: return nitrogen_kind(m, i, h);
    case element::S: return sulfur_kind(m, i);
    case element::Si: return Substituent::silyl;
    case element::F: return Substituent::fluoro;
    case element::Cl: return m.degree(i) == 1 ? Substituent::chloro : Substituent::unknown;
    case element::Br: return m.degree(i) == 1 ? Substituent::bromo : Substituent::unknown;
    case element::I: return m.degree(i) == 1 ? Substituent::iodo : Substituent::unknown;
    default: return Substituent::unknown;
  }
}

constexpr int kLargestRing = 8;  // larger ones are told apart no further

// Sizes of the smallest ring through each ring atom, kLargestRing + 1 for larger ones.
class RingSizes {
 public:
  RingSizes(const Molecule& m, std::vector<AtomInfo>& info) : m_(m), info_(info) {}
  void run() {
    for (int i = 0; i < m_.atom_count(); ++i) {
      if (!m_.atom(i).in_ring || at(i).ring != 0) continue;
      if (!lone_ring(i)) at(i).ring = static_cast<std::int8_t>(search(i));
    }
  }

 private:
  [[nodiscard]] AtomInfo& at(int i) const { return info_[static_cast<std::size_t>(i)]; }

  // A ring that shares no atom is walked round once for all its atoms.
  bool lone_ring(int start) {
    queue_.clear();
    int atom = start, from = -1;
    do {
      if (at(atom).ring_bonds != 2 || queue_.size() == kLargestRing) return false;
      queue_.push_back(atom);
      const auto near = m_.neighbours(atom);
      const auto next = std::find_if(near.begin(), near.end(),
                                     [&](const Neighbour& n) { return n.bond != from && m_.bond(n.bond).in_ring; });
      from = next->bond;
      atom = next->atom;
    } while (atom != start);
    for (const int a : queue_) at(a).ring = static_cast<std::int8_t>(queue_.size());
    return true;
  }

  // Breadth first over ring bonds.
  int search(int start) {
    const auto n = static_cast<std::size_t>(m_.atom_count());
    if (depth_.empty()) {
      depth_.assign(n, -1);
      branch_.resize(n);
    }
    int best = kLargestRing + 1;
    queue_.assign(1, start);
    depth_[static_cast<std::size_t>(start)] = 0;
    branch_[static_cast<std::size_t>(start)] = -1;
    for (std::size_t head = 0; head < queue_.size(); ++head) {
      const int u = queue_[head];
      const int du = depth_[static_cast<std::size_t>(u)];
      if (2 * du + 1 >= best) break;
      for (const auto& b : m_.neighbours(u)) {
        if (!m_.bond(b.bond).in_ring) continue;
        const auto v = static_cast<std::size_t>(b.atom);
        if (depth_[v] < 0) {
          depth_[v] = du + 1;
          branch_[v] = u == start ? b.atom : branch_[static_cast<std::size_t>(u)];
          queue_.push_back(b.atom);
        } else if (u != start && b.atom != start && branch_[v] != branch_[static_cast<std::size_t>(u)]) {
          best = std::min(best, du + depth_[v] + 1);
        }
      }
    }
    for (const int t : queue_) depth_[static_cast<std::size_t>(t)] = -1;
    return best;
  }

  const Molecule& m_;
  std::vector<AtomInfo>& info_;
  std::vector<int> queue_, depth_, branch_;
};

}  // namespace

const char* substituent_name(Substituent s) noexcept { return kNames[static_cast<std::size_t>(s)]; }

std::vector<AtomInfo> environment(const Molecule& m) {
  const auto n = static_cast<std::size_t>(m.atom_count());
  std::vector<AtomInfo> info(n);
  for (int i = 0; i < m.atom_count(); ++i) {
    auto& a = info[static_cast<std::size_t>(i)];
    a.hybrid = hybrid_of(m, i);
    a.kind = kind_of(m, i, a.hybrid);
    a.carbonyl = m.atom(i).element == element::C && double_to(m, i, element::O);
    if (!m.atom(i).in_ring) continue;
    for (const auto& nb : m.neighbours(i)) a.ring_bonds = static_cast<std::int8_t>(a.ring_bonds + m.bond(nb.bond).in_ring);
  }
  if (m.ring_count() > 0) RingSizes(m, info).run();
  return info;
}

}  // namespace halostep
