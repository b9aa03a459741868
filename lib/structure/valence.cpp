#include "valence.hpp"

#include <algorithm>

namespace halostep {
namespace {

constexpr int kNone[] = {0};
constexpr int k1[] = {1, 0};
constexpr int k2[] = {2, 0};
constexpr int k3[] = {3, 0};
constexpr int k4[] = {4, 0};
constexpr int k35[] = {3, 5, 0};
constexpr int k246[] = {2, 4, 6, 0};
constexpr int k1357[] = {1, 3, 5, 7, 0};

}  // namespace

const int* allowed_valences(int z, int q) noexcept {
  using namespace element;
  switch (z) {
    case H: return q == 0 ? k1 : kNone;
    case B: return q == -1 ? k4 : k3;
    case C: case Si: case Ge: case Sn: return q == 0 ? k4 : k3;
    case N: return q == 1 ? k4 : q == -1 ? k2 : k35;
    case P: case As: return q == 1 ? k4 : q == -1 ? k2 : k35;
    case O: return q == 1 ? k3 : q == -1 ? k1 : k2;
    case S: case Se: return q == 1 ? k35 : q == -1 ? k1 : k246;
    case F: return q == 0 ? k1 : q == 1 ? k2 : kNone;
    case Cl: case Br: case I: return q == 0 ? k1357 : q == 1 ? k2 : kNone;
    default: return nullptr;
  }
}

int explicit_valence(const Molecule& m, int atom, bool pi) noexcept {
  int v = m.atom(atom).hydrogens + (pi ? 1 : 0);
  for (const auto& n : m.neighbours(atom)) {
    const auto o = m.bond(n.bond).order;
    v += o == BondOrder::aromatic ? 1 : static_cast<int>(o);
  }
  return v;
}

namespace {

bool all_single(const Molecule& m, int atom) {
  return std::all_of(m.neighbours(atom).begin(), m.neighbours(atom).end(),
                     [&](const Neighbour& n) { return m.bond(n.bond).order == BondOrder::single; });
}

}  // namespace

std::optional<Error> check_valences(const Molecule& m) {
  for (int i = 0; i < m.atom_count(); ++i) {
    const auto& a = m.atom(i);
    const int* allowed = allowed_valences(a.element, a.charge);
    if (allowed == nullptr) continue;
    const int v = explicit_valence(m, i, false) + a.unpaired;
    int most = 0;
    for (const int* p = allowed; *p != 0; ++p) most = std::max(most, *p);
    // Five bonds of nitrogen are a way of writing charge separation: some of them are multiple.
    if (a.element == element::N && a.charge == 0 && all_single(m, i)) most = 3;
    if (v > most && !(a.element == element::H && m.degree(i) == 0)) {
      return Error{ErrorClass::valence,
                   std::string(element_symbol(a.element)) + " with " + std::to_string(v) + " bonds takes at most " + std::to_string(most),
                   "atom " + std::to_string(i + 1)};
    }
  }
  return std::nullopt;
}

namespace {

// Whether an aromatic atom must, may or must not carry a ring double bond.
enum class Pi { no, yes };

Pi pi_need(const Molecule& m, int i) {
  const auto& a = m.atom(i);
  for (const auto& n : m.neighbours(i)) {
    if (m.bond(n.bond).order == BondOrder::dbl) return Pi::no;  // e.g. the carbonyl carbon of a pyridone
  }
  const int v = explicit_valence(m, i, false) + a.unpaired;
  switch (a.element) {
    case element::C: return a.charge == 0 && v == 3 ? Pi::yes : Pi::no;
    case element::N: case element::P: case element::As: return (a.charge == 0 && v == 2) || (a.charge == 1 && v == 3) ? Pi::yes : Pi::no;
    case element::B: return a.charge == 0 && v == 2 ? Pi::yes : Pi::no;
    default: return a.charge == 1 && v == 2 ? Pi::yes : Pi::no;  // O, S, Se: lone-pair donors unless charged
  }
}

// Neighbours of all atoms one after the other.
struct FlatGraph {
  std::vector<int> from = {0}, flat;
  [[nodiscard]] std::size_t size() const { return from.size() - 1; }
  [[nodiscard]] std::span<const int> operator[](std::size_t v) const {
    return {flat.data() + from[v], flat.data() + from[v + 1]};
  }
};

// Maximum matching on a general graph by Edmonds' blossom algorithm (Can. J. Math. 1965, 17, 449); ring systems are small.
class Matching {
 public:
  explicit Matching(FlatGraph adjacent) : adj_(std::move(adjacent)), match_(adj_.size(), -1) {}
  [[nodiscard]] int partner(int v) const { return match_[at(v)]; }
  bool perfect() {
    for (int v = 0; v < size(); ++v) {
      if (match_[at(v)] >= 0) continue;
      for (const int w : adj_[at(v)]) {
        if (match_[at(w)] < 0) {
          match_[at(v)] = w;
          match_[at(w)] = v;
          break;
        }
      }
    }
    for (int v = 0; v < size(); ++v) {
      if (match_[at(v)] < 0 && !augment(v)) return false;
    }
    return true;
  }

 private:
  static std::size_t at(int i) { return static_cast<std::size_t>(i); }
  [[nodiscard]] int size() const { return static_cast<int>(adj_.size()); }
  int base_of_both(int a, int b) {
    std::vector<bool> seen(adj_.size(), false);
    for (;;) {
      a = base_[at(a)];
      seen[at(a)] = true;
      if (match_[at(a)] < 0) break;
      a = parent_[at(match_[at(a)])];
    }
    for (;;) {
      b = base_[at(b)];
      if (seen[at(b)]) return b;
      b = parent_[at(match_[at(b)])];
    }
  }
  void mark(int v, int base, int child, std::vector<bool>& blossom) {
    while (base_[at(v)] != base) {
      blossom[at(base_[at(v)])] = blossom[at(base_[at(match_[at(v)])])] = true;
      parent_[at(v)] = child;
      child = match_[at(v)];
      v = parent_[at(match_[at(v)])];
    }
  }
  bool augment(int root) {
    std::vector<bool> used(adj_.size(), false);
    parent_.assign(adj_.size(), -1);
    base_.resize(adj_.size());
    for (int i = 0; i < size(); ++i) base_[at(i)] = i;
    used[at(root)] = true;
    std::vector<int> queue{root};
    for (std::size_t head = 0; head < queue.size(); ++head) {
      const int v = queue[head];
      for (const int to : adj_[at(v)]) {
        if (base_[at(v)] == base_[at(to)] || match_[at(v)] == to) continue;
        if (to == root || (match_[at(to)] >= 0 && parent_[at(match_[at(to)])] >= 0)) {
          const int base = base_of_both(v, to);
          std::vector<bool> blossom(adj_.size(), false);
          mark(v, base, to, blossom);
          mark(to, base, v, blossom);
          for (int i = 0; i < size(); ++i) {
            if (!blossom[at(base_[at(i)])]) continue;
            base_[at(i)] = base;
            if (!used[at(i)]) {
              used[at(i)] = true;
              queue.push_back(i);
            }
          }
        } else if (parent_[at(to)] < 0) {
          parent_[at(to)] = v;
          if (match_[at(to)] < 0) {
            for (int u = to; u >= 0;) {
              const int p = parent_[at(u)], next = match_[at(p)];
              match_[at(u)] = p;
              match_[at(p)] = u;
              u = next;
            }
            return true;
          }
          used[at(match_[at(to)])] = true;
          queue.push_back(match_[at(to)]);
        }
      }
    }
    return false;
  }
  FlatGraph adj_;
  std::vector<int> match_, parent_, base_;
};

// The atoms that carry a ring double bond, in the given order, and which of them are joined by aromatic bonds.
struct PiSystem {
  std::vector<int> members;
  FlatGraph adjacent;
};

PiSystem pi_system(const Molecule& m, const std::vector<int>& order) {
  PiSystem s;
  std::vector<int> number(static_cast<std::size_t>(m.atom_count()), -1);
  for (const int i : order) {
    if (!m.atom(i).aromatic || pi_need(m, i) == Pi::no) continue;
    number[static_cast<std::size_t>(i)] = static_cast<int>(s.members.size());
    s.members.push_back(i);
  }
  auto& [from, flat] = s.adjacent;
  from.reserve(s.members.size() + 1);
  flat.reserve(3 * s.members.size());
  for (const int i : s.members) {
    for (const auto& n : m.neighbours(i)) {
      const int w = number[static_cast<std::size_t>(n.atom)];
      if (w >= 0 && m.bond(n.bond).order == BondOrder::aromatic) flat.push_back(w);
    }
    std::sort(flat.begin() + from.back(), flat.end());
    from.push_back(static_cast<int>(flat.size()));
  }
  return s;
}

}  // namespace

std::optional<Error> check_graph(const Molecule& m) {
  auto e = check_valences(m);
  return e ? e : check_aromaticity(m);
}

std::optional<Error> check_aromaticity(const Molecule& m) {
  std::vector<int> order;
  for (int i = 0; i < m.atom_count(); ++i) {
    if (!m.atom(i).aromatic) continue;
    if (!m.atom(i).in_ring) return Error{ErrorClass::aromaticity, "an aromatic atom outside a ring", "atom " + std::to_string(i + 1)};
    order.push_back(i);
  }
  if (order.empty()) return std::nullopt;
  auto s = pi_system(m, order);
  if (s.members.empty()) return std::nullopt;
  const int first = s.members.front();
  if (Matching(std::move(s.adjacent)).perfect()) return std::nullopt;
  return Error{ErrorClass::aromaticity, "no Kekule form for the aromatic system", "atom " + std::to_string(first + 1)};
}

std::vector<bool> kekule_double_bonds(const Molecule& m, const std::vector<int>& order) {
  std::vector<bool> out(static_cast<std::size_t>(m.bond_count()), false);
  auto s = pi_system(m, order);
  Matching matching(std::move(s.adjacent));
  if (!matching.perfect()) return out;
  for (std::size_t k = 0; k < s.members.size(); ++k) {
    const int other = s.members[static_cast<std::size_t>(matching.partner(static_cast<int>(k)))];
    out[static_cast<std::size_t>(m.bond_between(s.members[k], other))] = true;
  }
  return out;
}

}  // namespace halostep
