#include "tables/combine_rows.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <map>
#include <string_view>
#include <utility>

#include "adjust/combine.hpp"

namespace halostep {
namespace {

constexpr double kCoverage = 3.0;

std::size_t at(int i) { return static_cast<std::size_t>(i); }

/// Row numbers by key, keys in the order of their first row.
template <class Key, class KeyOf>
std::vector<std::vector<int>> grouped(std::size_t rows, KeyOf key_of) {
  std::vector<std::vector<int>> groups;
  std::map<Key, std::size_t> slot;
  for (std::size_t i = 0; i < rows; ++i) {
    const auto [it, added] = slot.try_emplace(key_of(i), groups.size());
    if (added) groups.emplace_back();
    groups[it->second].push_back(static_cast<int>(i));
  }
  return groups;
}

/// Values of the current rows of a bond, `but` left out.
std::vector<Quantity> current_values(const Table& t, const std::vector<int>& rows, int but) {
  std::vector<Quantity> values;
  for (const int i : rows) {
    const auto& r = t.bond_rows[at(i)];
    if (i != but && !r.superseded) values.push_back({r.d298, r.u});
  }
  return values;
}

void tell_outliers(const Table& t, const std::vector<int>& rows, const std::vector<RowPlace>& places, Faults& faults) {
  for (const int i : rows) {
    const auto& r = t.bond_rows[at(i)];
    if (r.superseded || !r.note.empty()) continue;
    const auto others = current_values(t, rows, i);
    if (others.empty()) continue;
    const auto rest = combine(others).value;
    const double off = std::abs(r.d298 - rest.value), u = std::hypot(r.u, rest.u);
    if (off <= kCoverage * u) continue;
    faults.add(places[at(i)].file, places[at(i)].line,
               fmt::format("{:.1f} kJ/mol is {:.1f} combined u from the bond's other rows ({:.1f}) and has no note",
                           r.d298, off / u, rest.value));
  }
}

/// A value known exactly (an element in its reference state) stands; all others are combined.
std::optional<Quantity> combined_enthalpy(const Table& t, const std::vector<int>& rows) {
  std::vector<Quantity> values;
  for (const int i : rows) {
    const auto& r = t.species_rows[at(i)];
    if (r.superseded || !r.dfh298) continue;
    if (*r.u == 0) return Quantity{*r.dfh298, 0};
    values.push_back({*r.dfh298, *r.u});
  }
  if (values.empty()) return std::nullopt;
  return combine(values).value;
}

std::ptrdiff_t method_rank(const SpeciesRow& r) {
  constexpr std::array<std::string_view, 4> order = {"evaluated", "measured", "derived", "computed"};
  return std::find(order.begin(), order.end(), r.method) - order.begin();
}

const SpeciesRow* preferred(const Table& t, const std::vector<int>& rows, std::optional<double> SpeciesRow::*field) {
  const SpeciesRow* best = nullptr;
  for (const int i : rows) {
    const auto& r = t.species_rows[at(i)];
    if (r.superseded || !(r.*field)) continue;
    if (best == nullptr || method_rank(r) < method_rank(*best)) best = &r;
  }
  return best;
}

// The rows give S and Cp without u (GUM 4.3, by experience): statistical mechanics and third-law values of evaluations
// agree within 0.2 to 1 J/(mol K) for closed shells; radicals with hindered rotors and low frequencies, and derived or
// computed values, within a few.
double entropy_u(const SpeciesRow& r, bool radical, bool atom) {
  if (atom) return 0.01;
  const double base = r.method == "evaluated" ? 0.7 : r.method == "measured" ? 1.5 : 3.0;
  return radical ? 2 * base : base;
}
constexpr double kHeatCapacityShare = 0.03;

bool monatomic(const std::string& smiles) {
  return smiles.front() == '[' && smiles.size() <= 4 && smiles.find('H') >= smiles.size() - 2;
}

int first_current(const Table& t, const std::vector<int>& rows) {
  for (const int i : rows) {
    if (!t.species_rows[at(i)].superseded) return i;
  }
  return -1;
}

}  // namespace

void combine_bonds(Table& table, const std::vector<BondKey>& keys, const std::vector<RowPlace>& places,
                   Faults& faults) {
  const auto key_of = [&](std::size_t i) { return keys[i]; };
  for (auto& rows : grouped<BondKey>(keys.size(), key_of)) {
    const auto& key = keys[at(rows.front())];
    if (key.molecule.empty()) continue;
    tell_outliers(table, rows, places, faults);
    const auto values = current_values(table, rows, -1);
    if (values.empty()) continue;
    BondEntry e{key.molecule, key.radical, key.leaving, combine(values).value, {}, -1, -1, -1, std::move(rows)};
    e.d298 = e.combined;
    table.bonds.push_back(std::move(e));
  }
}

void combine_species(Table& table, const std::vector<SpeciesKey>& keys) {
  const auto key_of = [&](std::size_t i) { return std::pair(keys[i].key, table.species_rows[i].phase); };
  for (auto& rows : grouped<std::pair<std::string, std::string>>(keys.size(), key_of)) {
    const int first = first_current(table, rows);
    if (first < 0 || keys[at(first)].key.empty()) continue;
    SpeciesEntry e;
    e.smiles = keys[at(first)].canonical;
    e.name = table.species_rows[at(first)].name;
    e.phase = table.species_rows[at(first)].phase;
    e.dfh298 = e.combined = combined_enthalpy(table, rows);
    if (const auto* r = preferred(table, rows, &SpeciesRow::s298)) {
      e.s298 = r->s298;
      e.u_s298 = entropy_u(*r, keys[at(first)].key != e.smiles, monatomic(e.smiles));
    }
    if (const auto* r = preferred(table, rows, &SpeciesRow::cp298)) {
      e.cp298 = r->cp298;
      e.u_cp298 = kHeatCapacityShare * *r->cp298;
    }
    e.rows = std::move(rows);
    table.species.push_back(std::move(e));
  }
}

}  // namespace halostep
