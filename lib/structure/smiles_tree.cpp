#include "smiles_tree.hpp"

#include <algorithm>

namespace halostep {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

class Builder {
 public:
  Builder(const Molecule& m, const std::vector<int>& rank) : m_(m), rank_(rank) {
    const auto n = at(m.atom_count());
    t_.parent.assign(n, -1);
    t_.parent_bond.assign(n, -1);
    t_.position.assign(n, -1);
    t_.children.resize(n);
    t_.closures.resize(n);
  }

  SmilesTree run() {
    std::vector<int> by_rank(rank_.size());
    for (int i = 0; i < m_.atom_count(); ++i) by_rank[at(rank_[at(i)])] = i;
    std::vector<int> seen_order;
    std::vector<bool> seen(rank_.size(), false);
    for (const int root : by_rank) {
      if (seen[at(root)]) continue;
      t_.roots.push_back(root);
      span(root, seen, seen_order);
    }
    sort_children(seen_order);
    for (const int root : t_.roots) write_order(root);
    find_closures();
    return std::move(t_);
  }

 private:
  std::vector<Neighbour> sorted(int a) const {
    const auto n = m_.neighbours(a);
    std::vector<Neighbour> out(n.begin(), n.end());
    std::sort(out.begin(), out.end(), [&](const Neighbour& x, const Neighbour& y) { return rank_[at(x.atom)] < rank_[at(y.atom)]; });
    return out;
  }

  void span(int root, std::vector<bool>& seen, std::vector<int>& order) {
    struct Frame {
      int atom;
      std::vector<Neighbour> next;
      std::size_t k;
    };
    std::vector<Frame> stack;
    const auto enter = [&](int a) {
      seen[at(a)] = true;
      order.push_back(a);
      stack.push_back({a, sorted(a), 0});
    };
    enter(root);
    while (!stack.empty()) {
      auto& f = stack.back();
      if (f.k == f.next.size()) {
        stack.pop_back();
        continue;
      }
      const auto n = f.next[f.k++];
      if (seen[at(n.atom)]) continue;
      t_.parent[at(n.atom)] = f.atom;
      t_.parent_bond[at(n.atom)] = n.bond;
      t_.children[at(f.atom)].push_back(n.atom);
      enter(n.atom);
    }
  }

  void sort_children(const std::vector<int>& order) {
    std::vector<int> size(order.size(), 1);
    for (auto it = order.rbegin(); it != order.rend(); ++it) {
      if (t_.parent[at(*it)] >= 0) size[at(t_.parent[at(*it)])] += size[at(*it)];
    }
    for (auto& c : t_.children) {
      std::stable_sort(c.begin(), c.end(), [&](int x, int y) {
        return size[at(x)] != size[at(y)] ? size[at(x)] < size[at(y)] : rank_[at(x)] < rank_[at(y)];
      });
    }
  }

  void write_order(int root) {
    std::vector<int> stack = {root};
    while (!stack.empty()) {
      const int a = stack.back();
      stack.pop_back();
      t_.position[at(a)] = static_cast<int>(t_.order.size());
      t_.order.push_back(a);
      const auto& c = t_.children[at(a)];
      stack.insert(stack.end(), c.rbegin(), c.rend());
    }
  }

  // Smallest free digit at each opening; one closed at an atom is free again after that atom.
  void find_closures() {
    std::vector<bool> used(1, true);
    std::vector<int> digit(at(m_.bond_count()), 0);
    for (const int a : t_.order) {
      std::vector<RingClosure> closing, opening;
      for (const auto& n : m_.neighbours(a)) {
        if (n.bond == t_.parent_bond[at(a)] || n.bond == t_.parent_bond[at(n.atom)]) continue;
        if (t_.before(n.atom, a)) closing.push_back({n.bond, n.atom, digit[at(n.bond)], false});
        else opening.push_back({n.bond, n.atom, 0, true});
      }
      std::sort(closing.begin(), closing.end(), [](const RingClosure& x, const RingClosure& y) { return x.digit < y.digit; });
      std::sort(opening.begin(), opening.end(), [&](const RingClosure& x, const RingClosure& y) { return t_.before(x.other, y.other); });
      for (auto& o : opening) {
        const auto free = std::find(used.begin(), used.end(), false);
        o.digit = static_cast<int>(free - used.begin());
        if (free == used.end()) used.push_back(true);
        else used[at(o.digit)] = true;
        digit[at(o.bond)] = o.digit;
      }
      for (const auto& c : closing) used[at(c.digit)] = false;
      auto& all = t_.closures[at(a)];
      all = std::move(closing);
      all.insert(all.end(), opening.begin(), opening.end());
    }
  }

  const Molecule& m_;
  const std::vector<int>& rank_;
  SmilesTree t_;
};

}  // namespace

SmilesTree smiles_tree(const Molecule& m, const std::vector<int>& rank) { return Builder(m, rank).run(); }

}  // namespace halostep
