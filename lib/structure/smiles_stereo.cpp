#include "smiles_stereo.hpp"

#include <algorithm>
#include <array>
#include <utility>

namespace halostep {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

// Order in which the text names the four neighbours; -1 is the hydrogen or lone pair.
std::vector<int> written_neighbours(const SmilesTree& t, int centre, bool implicit) {
  std::vector<int> out;
  if (t.parent[at(centre)] >= 0) out.push_back(t.parent[at(centre)]);
  if (implicit) out.push_back(-1);
  for (const auto& c : t.closures[at(centre)]) out.push_back(c.other);
  out.insert(out.end(), t.children[at(centre)].begin(), t.children[at(centre)].end());
  return out;
}

// Two equal acyclic neighbours make a centre symmetric, unless another centre tells them apart.
bool symmetric(const Molecule& m, const TetrahedralStereo& s, const std::vector<int>& classes) {
  if (m.atom(s.centre).hydrogens > 1) return true;
  if (m.tetrahedral().size() + m.double_bonds().size() > 1) return false;
  for (int i = 0; i < 4; ++i) {
    for (int k = i + 1; k < 4; ++k) {
      const int a = s.neighbours[i], b = s.neighbours[k];
      if (a < 0 || b < 0 || classes[at(a)] != classes[at(b)]) continue;
      if (!m.bond(m.bond_between(s.centre, a)).in_ring) return true;
    }
  }
  return false;
}

bool odd(std::array<int, 4> p) {
  bool o = false;
  for (std::size_t i = 0; i < 4; ++i) {
    while (p[i] != static_cast<int>(i)) {
      std::swap(p[i], p[at(p[i])]);
      o = !o;
    }
  }
  return o;
}

// One double bond end: its marked neighbour and on which side that lies (+1 above).
struct End {
  int neighbour = -1;
  int bond = -1;
};

class Directions {
 public:
  Directions(const Molecule& m, const SmilesTree& t) : m_(m), t_(t), mark_(at(m.bond_count()), 0) {}

  std::vector<int> run() {
    std::vector<DoubleBondStereo> todo(m_.double_bonds().begin(), m_.double_bonds().end());
    const auto first = [&](const DoubleBondStereo& d) {
      return std::min(t_.position[at(m_.bond(d.bond).a)], t_.position[at(m_.bond(d.bond).b)]);
    };
    std::sort(todo.begin(), todo.end(), [&](const auto& x, const auto& y) { return first(x) < first(y); });
    while (!todo.empty()) {
      // Bonds that share a mark with one already written come first: their direction is no longer free.
      auto it = std::find_if(todo.begin(), todo.end(), [&](const auto& d) { return marked(d); });
      if (it == todo.end()) it = todo.begin();
      place(*it);
      todo.erase(it);
    }
    return std::move(mark_);
  }

 private:
  bool marked(const DoubleBondStereo& d) const {
    return marked_end(m_.bond(d.bond).a, d.bond).bond >= 0 || marked_end(m_.bond(d.bond).b, d.bond).bond >= 0;
  }
  End marked_end(int a, int dbl) const {
    for (const auto& n : m_.neighbours(a)) {
      if (n.bond != dbl && mark_[at(n.bond)] != 0) return {n.atom, n.bond};
    }
    return {};
  }
  // The neighbour written first carries the mark; ring closures only where there is nothing else.
  End free_end(int a, int dbl) const {
    End best;
    const auto key = [&](const Neighbour& n) {
      const bool tree = n.bond == t_.parent_bond[at(a)] || n.bond == t_.parent_bond[at(n.atom)];
      return std::pair(!tree, t_.position[at(n.atom)]);
    };
    std::pair<bool, int> best_key{true, 0};
    for (const auto& n : m_.neighbours(a)) {
      if (n.bond == dbl || m_.bond(n.bond).order != BondOrder::single) continue;
      if (best.bond < 0 || key(n) < best_key) {
        best = {n.atom, n.bond};
        best_key = key(n);
      }
    }
    return best;
  }
  int side(int a, const End& e) const { return t_.before(a, e.neighbour) ? mark_[at(e.bond)] : -mark_[at(e.bond)]; }
  void set_side(int a, const End& e, int s) { mark_[at(e.bond)] = t_.before(a, e.neighbour) ? s : -s; }

  void place(const DoubleBondStereo& d) {
    int a = m_.bond(d.bond).a, b = m_.bond(d.bond).b, ra = d.ref_a, rb = d.ref_b;
    if (t_.before(b, a)) {
      std::swap(a, b);
      std::swap(ra, rb);
    }
    End ea = marked_end(a, d.bond), eb = marked_end(b, d.bond);
    const bool done_a = ea.bond >= 0, done_b = eb.bond >= 0;
    if (!done_a) ea = free_end(a, d.bond);
    if (!done_b) eb = free_end(b, d.bond);
    if (ea.bond < 0 || eb.bond < 0 || (done_a && done_b)) return;
    const bool same = d.cis == ((ea.neighbour == ra) == (eb.neighbour == rb));
    if (!done_a && !done_b) mark_[at(ea.bond)] = 1;
    if (done_b) set_side(a, ea, same ? side(b, eb) : -side(b, eb));
    else set_side(b, eb, same ? side(a, ea) : -side(a, ea));
  }

  const Molecule& m_;
  const SmilesTree& t_;
  std::vector<int> mark_;
};

}  // namespace

std::vector<int> tetrahedral_marks(const Molecule& m, const SmilesTree& t, const std::vector<int>& classes) {
  std::vector<int> mark(at(m.atom_count()), 0);
  for (const auto& s : m.tetrahedral()) {
    if (symmetric(m, s, classes)) continue;
    const bool implicit = std::find(std::begin(s.neighbours), std::end(s.neighbours), -1) != std::end(s.neighbours);
    const auto written = written_neighbours(t, s.centre, implicit);
    if (written.size() != 4) continue;
    std::array<int, 4> p{};
    bool complete = true;
    for (std::size_t i = 0; i < 4; ++i) {
      const auto* found = std::find(std::begin(s.neighbours), std::end(s.neighbours), written[i]);
      complete = complete && found != std::end(s.neighbours);
      p[i] = static_cast<int>(found - std::begin(s.neighbours));
    }
    if (complete) mark[at(s.centre)] = s.clockwise != odd(p) ? 1 : -1;
  }
  return mark;
}

std::vector<int> direction_marks(const Molecule& m, const SmilesTree& t) { return Directions(m, t).run(); }

}  // namespace halostep
