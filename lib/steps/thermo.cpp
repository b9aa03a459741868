#include "thermo.hpp"

#include <algorithm>
#include <cmath>

#include "../bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "../bonds/sources.hpp"

namespace halostep {

ThermoBook::ThermoBook(const Table& table) : table_(table) {
  for (std::size_t i = 0; i < table.species.size(); ++i) {
    const auto& s = table.species[i];
    (s.phase == "g" ? gas_ : condensed_).emplace(s.phase == "g" ? s.smiles : s.smiles + "|" + s.phase, static_cast<int>(i));
  }
}

const SpeciesEntry* ThermoBook::find(std::string_view canonical) const {
  const auto it = gas_.find(std::string(canonical));
  return it == gas_.end() ? nullptr : &table_.species[static_cast<std::size_t>(it->second)];
}

const SpeciesEntry* ThermoBook::find(std::string_view canonical, std::string_view phase) const {
  const auto it = condensed_.find(std::string(canonical) + "|" + std::string(phase));
  return it == condensed_.end() ? nullptr : &table_.species[static_cast<std::size_t>(it->second)];
}

const SpeciesEntry* ThermoBook::find_radical(const Molecule& radical, std::string_view canonical) const {
  if (const auto* direct = find(canonical)) return direct;
  std::call_once(once_, [this] {
    for (const auto& [text, index] : gas_) {
      if (text.find('[') == std::string::npos) continue;
      const auto m = parse_smiles(text, ParseMode::species);
      if (m.ok() && m.value().unpaired() == 1) skeletons_.emplace(skeleton_key(m.value()), index);
    }
  });
  const auto it = skeletons_.find(skeleton_key(radical));
  return it == skeletons_.end() ? nullptr : &table_.species[static_cast<std::size_t>(it->second)];
}

void ThermoBook::add(ThermoSum& sum, const SpeciesEntry* e, double nu, std::string_view name) const {
  if (e == nullptr || !e->s298) {
    if (sum.s_known) sum.missing = name;
    sum.s_known = false;
    return;
  }
  sum.s += nu * *e->s298;
  // Of several rows the table takes S and Cp from one each: those that give the value used.
  for (const int row : e->rows) {
    const auto& r = table_.species_rows[static_cast<std::size_t>(row)];
    if (!r.superseded && ((r.s298 && r.s298 == e->s298) || (r.cp298 && r.cp298 == e->cp298))) add_source(sum.sources, r.source);
  }
  const auto same = std::find_if(sum.parts.begin(), sum.parts.end(), [&](const auto& p) { return p.first == e; });
  if (same != sum.parts.end()) same->second += nu;
  else sum.parts.emplace_back(e, nu);
  if (!e->cp298) {
    sum.cp_known = false;
    return;
  }
  sum.cp += nu * *e->cp298;
}

namespace {

double root_sum(const ThermoSum& sum, double SpeciesEntry::*u) {
  double u2 = 0;
  for (const auto& [e, nu] : sum.parts) u2 += nu * nu * (e->*u) * (e->*u);
  return std::sqrt(u2);
}

}  // namespace

double u_of_s(const ThermoSum& sum) { return root_sum(sum, &SpeciesEntry::u_s298); }
double u_of_cp(const ThermoSum& sum) { return root_sum(sum, &SpeciesEntry::u_cp298); }

std::vector<int> ThermoBook::sources(const SpeciesEntry& e) const {
  std::vector<int> out;
  for (const int row : e.rows) {
    const auto& r = table_.species_rows[static_cast<std::size_t>(row)];
    if (!r.superseded) add_source(out, r.source);
  }
  return out;
}

}  // namespace halostep
