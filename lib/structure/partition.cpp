#include "partition.hpp"

#include <algorithm>
#include <numeric>

namespace halostep {
namespace {

std::uint64_t mix(std::uint64_t x) {  // finaliser of splitmix64 (Steele, Lea & Flood, OOPSLA 2014)
  x += 0x9e3779b97f4a7c15ULL;
  x = (x ^ (x >> 30)) * 0xbf58476d1ce4e5b9ULL;
  x = (x ^ (x >> 27)) * 0x94d049bb133111ebULL;
  return x ^ (x >> 31);
}

std::uint64_t bond_weight(BondOrder o) { return 1ULL << (16 * (static_cast<unsigned>(o) - 1)); }

// Kept from one refinement to the next: most structures are small, and making room would cost as much as the work.
struct Room {
  std::vector<int> touched_cells, touched, members, starts;
};
Room& room() {
  thread_local Room r;
  return r;
}

}  // namespace

std::uint64_t atom_invariant(const Molecule& m, int i) {
  const auto& a = m.atom(i);
  std::uint64_t ring_bonds = 0;
  if (a.in_ring) {
    for (const auto& n : m.neighbours(i)) ring_bonds += m.bond(n.bond).in_ring;
  }
  std::uint64_t k = a.element;
  k = k << 8 | static_cast<std::uint64_t>(static_cast<std::uint8_t>(m.degree(i)));
  k = k << 4 | (a.hydrogens & 15U);
  k = k << 10 | (a.isotope & 1023U);
  k = k << 8 | static_cast<std::uint8_t>(a.charge + 64);
  k = k << 4 | (a.unpaired & 15U);
  k = k << 1 | static_cast<std::uint64_t>(a.aromatic);
  return k << 4 | (ring_bonds & 15U);
}

Partition::Partition(const Molecule& m) : m_(&m) {
  const auto n = static_cast<std::size_t>(m.atom_count());
  order_.resize(n);
  where_.resize(n);
  cell_.resize(n);
  size_.assign(n, 0);
  queued_.assign(n, 0);
  count_.resize(n);
  queue_.reserve(n + n / 2);
  std::iota(order_.begin(), order_.end(), 0);
  for (std::size_t i = 0; i < n; ++i) count_[i] = atom_invariant(m, static_cast<int>(i));
  std::sort(order_.begin(), order_.end(), [&](int a, int b) { return count_[static_cast<std::size_t>(a)] < count_[static_cast<std::size_t>(b)]; });
  for (std::size_t i = 0; i < n;) {
    std::size_t j = i;
    const auto key = count_[static_cast<std::size_t>(order_[i])];
    for (; j < n && count_[static_cast<std::size_t>(order_[j])] == key; ++j) {
      cell_[static_cast<std::size_t>(order_[j])] = static_cast<int>(i);
      where_[static_cast<std::size_t>(order_[j])] = static_cast<int>(j);
    }
    size_[i] = static_cast<int>(j - i);
    push(static_cast<int>(i));
    i = j;
  }
  std::fill(count_.begin(), count_.end(), 0);
  refine();
}

void Partition::push(int start) {
  if (queued_[static_cast<std::size_t>(start)]) return;
  queued_[static_cast<std::size_t>(start)] = 1;
  queue_.push_back(start);
}

// Splits the run [start, end) whose atoms are already sorted by count_; the largest piece may stay off the list
// (Hopcroft 1971) unless the whole cell was on it.
void Partition::split(int start, int end) {
  const bool was_queued = queued_[static_cast<std::size_t>(start)] != 0;
  auto& starts = room().starts;
  starts.clear();
  int largest = start, largest_size = 0;
  for (int i = start; i < end;) {
    int j = i;
    const auto key = count_[static_cast<std::size_t>(order_[static_cast<std::size_t>(i)])];
    while (j < end && count_[static_cast<std::size_t>(order_[static_cast<std::size_t>(j)])] == key) ++j;
    for (int k = i; k < j; ++k) {
      const auto atom = static_cast<std::size_t>(order_[static_cast<std::size_t>(k)]);
      cell_[atom] = i;
      where_[atom] = k;
    }
    size_[static_cast<std::size_t>(i)] = j - i;
    starts.push_back(i);
    if (j - i > largest_size) {
      largest = i;
      largest_size = j - i;
    }
    i = j;
  }
  if (starts.size() == 1) return;
  for (const int s : starts) {
    if (was_queued || s != largest) push(s);
  }
}

void Partition::refine() {
  auto& [touched_cells, touched, members, starts] = room();
  while (head_ < queue_.size()) {
    const int w = queue_[head_++];
    queued_[static_cast<std::size_t>(w)] = 0;
    if (head_ > 4096 && head_ * 2 > queue_.size()) {
      queue_.erase(queue_.begin(), queue_.begin() + static_cast<std::ptrdiff_t>(head_));
      head_ = 0;
    }
    members.assign(order_.begin() + w, order_.begin() + w + size_[static_cast<std::size_t>(w)]);
    touched.clear();
    touched_cells.clear();
    for (const int a : members) {
      for (const auto& nb : m_->neighbours(a)) {
        auto& c = count_[static_cast<std::size_t>(nb.atom)];
        if (c == 0) {
          touched.push_back(nb.atom);
          touched_cells.push_back(cell_[static_cast<std::size_t>(nb.atom)]);
        }
        c += bond_weight(m_->bond(nb.bond).order);
      }
    }
    std::sort(touched_cells.begin(), touched_cells.end());
    touched_cells.erase(std::unique(touched_cells.begin(), touched_cells.end()), touched_cells.end());
    if (touched.size() > 1) {
      std::sort(touched.begin(), touched.end(), [&](int a, int b) {
        const auto ca = cell_[static_cast<std::size_t>(a)], cb = cell_[static_cast<std::size_t>(b)];
        return ca != cb ? ca < cb : count_[static_cast<std::size_t>(a)] < count_[static_cast<std::size_t>(b)];
      });
    }
    std::size_t t = 0;
    for (const int start : touched_cells) {
      const std::size_t from = t;
      while (t < touched.size() && cell_[static_cast<std::size_t>(touched[t])] == start) ++t;
      const int cell_end = start + size_[static_cast<std::size_t>(start)];
      const auto hit = static_cast<int>(t - from);
      if (size_[static_cast<std::size_t>(start)] == 1) continue;
      // Touched atoms move to the end of the cell, in order of their count.
      int at = cell_end - hit;
      for (std::size_t k = from; k < t; ++k, ++at) {
        const auto atom = static_cast<std::size_t>(touched[k]);
        const int other = order_[static_cast<std::size_t>(at)];
        const int old = where_[atom];
        order_[static_cast<std::size_t>(old)] = other;
        where_[static_cast<std::size_t>(other)] = old;
        order_[static_cast<std::size_t>(at)] = touched[k];
        where_[atom] = at;
      }
      const int tail = cell_end - hit;
      if (tail > start) {
        // Two-way split first: untouched | touched; then the touched part by count.
        const bool was_queued = queued_[static_cast<std::size_t>(start)] != 0;
        size_[static_cast<std::size_t>(start)] = tail - start;
        size_[static_cast<std::size_t>(tail)] = hit;
        for (int k = tail; k < cell_end; ++k) cell_[static_cast<std::size_t>(order_[static_cast<std::size_t>(k)])] = tail;
        if (was_queued || hit <= tail - start) push(tail);
        else push(start);
        if (was_queued) push(start);
        split(tail, cell_end);
        // The untouched remainder stands for the largest piece only when it was one; be safe for deeper splits.
        if (!was_queued && hit > tail - start) push(tail);
      } else {
        split(start, cell_end);
      }
    }
    for (const int a : touched) count_[static_cast<std::size_t>(a)] = 0;
  }
  queue_.clear();
  head_ = 0;
}

void Partition::individualise(int atom) {
  const int start = cell_[static_cast<std::size_t>(atom)], n = size_[static_cast<std::size_t>(start)];
  if (n == 1) return;
  const int at = where_[static_cast<std::size_t>(atom)], first = order_[static_cast<std::size_t>(start)];
  order_[static_cast<std::size_t>(at)] = first;
  where_[static_cast<std::size_t>(first)] = at;
  order_[static_cast<std::size_t>(start)] = atom;
  where_[static_cast<std::size_t>(atom)] = start;
  size_[static_cast<std::size_t>(start)] = 1;
  size_[static_cast<std::size_t>(start) + 1] = n - 1;
  for (int k = start + 1; k < start + n; ++k) cell_[static_cast<std::size_t>(order_[static_cast<std::size_t>(k)])] = start + 1;
  push(start);
  refine();
}

void Partition::split_by(int start, const std::vector<std::uint64_t>& key) {
  const int n = size_[static_cast<std::size_t>(start)];
  std::vector<std::pair<std::uint64_t, int>> sorted;
  for (int k = 0; k < n; ++k) sorted.emplace_back(key[static_cast<std::size_t>(k)], order_[static_cast<std::size_t>(start + k)]);
  std::sort(sorted.begin(), sorted.end());
  for (int k = 0; k < n; ++k) {
    order_[static_cast<std::size_t>(start + k)] = sorted[static_cast<std::size_t>(k)].second;
    count_[static_cast<std::size_t>(sorted[static_cast<std::size_t>(k)].second)] = sorted[static_cast<std::size_t>(k)].first;
  }
  split(start, start + n);
  for (const auto& s : sorted) count_[static_cast<std::size_t>(s.second)] = 0;
  refine();
}

std::uint64_t Partition::hash() const {
  std::uint64_t h = mix(order_.size());
  std::vector<std::uint64_t> near;
  for (std::size_t start = 0; start < order_.size(); start += static_cast<std::size_t>(size_[start])) {
    const int a = order_[start];
    near.clear();
    for (const auto& n : m_->neighbours(a)) {
      near.push_back(mix(static_cast<std::uint64_t>(cell(n.atom)) * 8 + static_cast<std::uint64_t>(m_->bond(n.bond).order)));
    }
    std::uint64_t sum = 0;
    for (const auto v : near) sum += v;
    h = mix(h ^ mix(atom_invariant(*m_, a)) ^ (sum + (static_cast<std::uint64_t>(start) << 32) + static_cast<std::uint64_t>(size_[start])));
  }
  return h;
}

}  // namespace halostep
