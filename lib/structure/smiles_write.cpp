#include <fmt/format.h>

#include <algorithm>
#include <cstdlib>

#include "halostep/structure.hpp"
#include "smiles_stereo.hpp"
#include "smiles_tree.hpp"
#include "symmetry.hpp"
#include "valence.hpp"

namespace halostep {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

// Orders of ties tried for a structure with stereo and equivalent atoms; the smallest text is the canonical one.
// Structures with more ties than this may get different texts for different input orders.
constexpr int kMaxTexts = 256;

int bond_sum(const Molecule& m, int a) {
  int s = 0;
  for (const auto& n : m.neighbours(a)) {
    const auto o = m.bond(n.bond).order;
    s += o == BondOrder::aromatic ? 1 : static_cast<int>(o);
  }
  return s;
}

// Hydrogens a reader adds to an atom without brackets (OpenSMILES 1.0, section 3.1.5); -1 outside the organic subset.
int implied_hydrogens(const Molecule& m, int i) {
  const auto& a = m.atom(i);
  const int sum = bond_sum(m, i);
  const auto fill = [&](std::initializer_list<int> valences) {
    for (const int v : valences) {
      if (v >= sum) return v - sum;
    }
    return 0;
  };
  if (a.aromatic) {
    switch (a.element) {
      case element::C: return std::max(0, 3 - sum);
      case element::B: return std::max(0, 2 - sum);
      case element::N: case element::O: case element::P: case element::S: return 0;
      default: return -1;
    }
  }
  switch (a.element) {
    case element::B: return fill({3});
    case element::C: return fill({4});
    case element::N: case element::P: return fill({3, 5});
    case element::O: return fill({2});
    case element::S: return fill({2, 4, 6});
    case element::F: case element::Cl: case element::Br: case element::I: return fill({1});
    default: return -1;
  }
}

std::string atom_text(const Molecule& m, int i, int mark, bool kekule) {
  const auto& a = m.atom(i);
  std::string symbol = element_symbol(a.element);
  const bool lower = a.aromatic && !kekule;
  if (lower) symbol[0] = static_cast<char>(symbol[0] - 'A' + 'a');
  if (a.element == element::H) {
    const std::string h = a.isotope ? fmt::format("[{}H]", a.isotope) : "[H]";
    return a.hydrogens ? h + "[H]" : h;
  }
  // Of an aromatic atom written in upper case the hydrogens are stated.
  const bool implied = lower || !a.aromatic ? implied_hydrogens(m, i) == a.hydrogens : a.element == element::C && a.hydrogens <= 1;
  if (a.isotope == 0 && a.charge == 0 && a.unpaired == 0 && mark == 0 && implied) return symbol;
  std::string s = "[";
  if (a.isotope) s += std::to_string(a.isotope);
  s += symbol;
  if (mark) s += mark > 0 ? "@@" : "@";
  if (a.hydrogens) s += 'H';
  if (a.hydrogens > 1) s += std::to_string(static_cast<int>(a.hydrogens));
  if (a.charge) s += a.charge > 0 ? '+' : '-';
  if (std::abs(a.charge) > 1) s += std::to_string(std::abs(static_cast<int>(a.charge)));
  return s + ']';
}

class Writer {
 public:
  Writer(const Molecule& m, const std::vector<int>& rank, const std::vector<int>* classes) : m_(m), t_(smiles_tree(m, rank)) {
    if (classes != nullptr) {
      tetrahedral_ = tetrahedral_marks(m, t_, *classes);
      direction_ = direction_marks(m, t_);
    } else {
      tetrahedral_.assign(at(m.atom_count()), 0);
      direction_.assign(at(m.bond_count()), 0);
    }
    // A radical on a ring nitrogen (pyrrolyl) has no reading in lower case: readers would look for a hydrogen.
    for (int i = 0; i < m.atom_count(); ++i) {
      kekule_ = kekule_ || (m.atom(i).aromatic && m.atom(i).unpaired > 0 && m.atom(i).element != element::C);
    }
    if (kekule_) double_ = kekule_double_bonds(m, t_.order);
  }

  std::string run() {
    for (const int root : t_.roots) {
      if (!out_.empty()) out_ += '.';
      fragment(root);
    }
    return std::move(out_);
  }

 private:
  void bond(int b) {
    switch (m_.bond(b).order) {
      case BondOrder::dbl: out_ += '='; break;
      case BondOrder::triple: out_ += '#'; break;
      case BondOrder::aromatic:
        if (kekule_ && double_[at(b)]) out_ += '=';
        break;
      case BondOrder::single:
        if (direction_[at(b)]) out_ += direction_[at(b)] > 0 ? '/' : '\\';
        else if (!kekule_ && m_.atom(m_.bond(b).a).aromatic && m_.atom(m_.bond(b).b).aromatic) out_ += '-';
    }
  }
  void atom(int a) {
    if (t_.parent_bond[at(a)] >= 0) bond(t_.parent_bond[at(a)]);
    out_ += atom_text(m_, a, tetrahedral_[at(a)], kekule_);
    for (const auto& c : t_.closures[at(a)]) {
      if (c.opens) bond(c.bond);
      out_ += c.digit < 10 ? std::to_string(c.digit) : c.digit < 100 ? fmt::format("%{}", c.digit) : fmt::format("%({})", c.digit);
    }
  }
  void fragment(int root) {
    constexpr int kClose = -1;
    std::vector<std::pair<int, bool>> stack = {{root, false}};  // atom or kClose; in brackets?
    while (!stack.empty()) {
      const auto [a, branch] = stack.back();
      stack.pop_back();
      if (a == kClose) {
        out_ += ')';
        continue;
      }
      if (branch) out_ += '(';
      atom(a);
      if (branch) stack.emplace_back(kClose, false);
      const auto& c = t_.children[at(a)];
      for (std::size_t k = c.size(); k-- > 0;) stack.emplace_back(c[k], k + 1 < c.size());
    }
  }

  const Molecule& m_;
  SmilesTree t_;
  std::vector<int> tetrahedral_, direction_;
  bool kekule_ = false;
  std::vector<bool> double_;
  std::string out_;
};

std::vector<int> ranks_of(const Partition& p, int n) {
  std::vector<int> rank(at(n));
  for (int i = 0; i < n; ++i) rank[at(i)] = p.cell(i);
  return rank;
}

// Ranks ignore stereo, so equivalent atoms may differ in it: try them all and keep the smallest text.
void smallest(const Molecule& m, const Partition& p, const std::vector<int>& classes, int& left, std::string& best) {
  int start = 0;
  while (start < m.atom_count() && p.cell_size(start) == 1) ++start;
  if (start == m.atom_count()) {
    --left;
    auto text = Writer(m, ranks_of(p, m.atom_count()), &classes).run();
    if (best.empty() || text < best) best = std::move(text);
    return;
  }
  // Equal end atoms on one centre cannot be told apart by any stereo.
  const bool ends = m.degree(p.order()[at(start)]) == 1 && m.tetrahedral().size() + m.double_bonds().size() == 1;
  const int size = ends ? 1 : p.cell_size(start);
  for (int k = 0; k < size && left > 0; ++k) {
    Partition q = p;
    q.individualise(p.order()[at(start + k)]);
    smallest(m, q, classes, left, best);
  }
}

std::string smallest_text(const Molecule& m, const Partition& p, const std::vector<int>& classes) {
  std::string best;
  int left = kMaxTexts;
  smallest(m, p, classes, left, best);
  return best;
}

bool equal_pair(const std::vector<int>& atoms, const std::vector<int>& classes) {
  for (std::size_t i = 0; i < atoms.size(); ++i) {
    for (std::size_t k = i + 1; k < atoms.size(); ++k) {
      if (atoms[i] >= 0 && atoms[k] >= 0 && classes[at(atoms[i])] == classes[at(atoms[k])]) return true;
    }
  }
  return false;
}

bool equal_substituents(const Molecule& m, const DoubleBondStereo& d, const std::vector<int>& classes) {
  const auto& b = m.bond(d.bond);
  for (const auto& [end, other] : {std::pair(b.a, b.b), std::pair(b.b, b.a)}) {
    std::vector<int> atoms;
    for (const auto& n : m.neighbours(end)) {
      if (n.atom != other) atoms.push_back(n.atom);
    }
    if (equal_pair(atoms, classes)) return true;
  }
  return false;
}

// Two substituents may have become equal since the stereo was read. A mark whose inversion leaves the structure the
// same says nothing and goes.
Molecule meaningful_stereo(const Molecule& m, const Partition& p, const std::vector<int>& classes) {
  std::vector<TetrahedralStereo> centres(m.tetrahedral().begin(), m.tetrahedral().end());
  std::vector<DoubleBondStereo> doubles(m.double_bonds().begin(), m.double_bonds().end());
  const auto text = [&] { return smallest_text(m.with_stereo(centres, doubles), p, classes); };
  const auto by_class = [&](const TetrahedralStereo& x, const TetrahedralStereo& y) {
    return classes[at(x.centre)] < classes[at(y.centre)];
  };
  std::stable_sort(centres.begin(), centres.end(), by_class);
  // A mark whose inverse gives the same text says nothing; only marks between equal branches can be such.
  const auto drop_idle = [&](auto& marks, auto may_be_idle, auto side) {
    for (std::size_t i = 0; i < marks.size();) {
      bool same = false;
      if (may_be_idle(marks[i])) {
        const auto before = text();
        bool& is = marks[i].*side;
        is = !is;
        same = text() == before;
        is = !is;
      }
      if (same) marks.erase(marks.begin() + static_cast<std::ptrdiff_t>(i));
      else ++i;
    }
  };
  drop_idle(centres, [&](const TetrahedralStereo& s) {
    return equal_pair({std::begin(s.neighbours), std::end(s.neighbours)}, classes);
  }, &TetrahedralStereo::clockwise);
  drop_idle(doubles, [&](const DoubleBondStereo& s) { return equal_substituents(m, s, classes); }, &DoubleBondStereo::cis);
  return m.with_stereo(std::move(centres), std::move(doubles));
}

}  // namespace

std::string canonical_smiles(const Molecule& m, bool stereo) {
  if (m.atom_count() == 0) return {};
  if (!stereo || (m.tetrahedral().empty() && m.double_bonds().empty())) return Writer(m, canonical_ranks(m), nullptr).run();
  const Partition p = orbit_partition(m);
  const std::vector<int> classes = ranks_of(p, m.atom_count());
  return smallest_text(meaningful_stereo(m, p, classes), p, classes);
}

}  // namespace halostep
