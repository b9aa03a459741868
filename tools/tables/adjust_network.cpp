#include "tables/adjust_network.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cctype>
#include <cmath>
#include <optional>
#include <set>

#include "bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "tables/network_groups.hpp"

namespace halostep {
namespace {

constexpr std::array kReferenceStates = {"[H][H]", "FF", "ClCl", "O=O", "N#N"};
constexpr double kMisread = 25;  // kJ/mol: a radical's enthalpy read from a note must fit its bond within this

std::size_t at(int i) { return static_cast<std::size_t>(i); }

std::string key_of(const std::string& smiles) {
  const auto m = parse_smiles(smiles, ParseMode::species);
  return m.ok() ? species_key(m.value()) : smiles;
}

class Builder {
 public:
  explicit Builder(const Table& t) : t_(t) {}

  EnthalpyNetwork build() {
    for (const auto& s : t_.species) add_species(s);
    for (const auto& b : t_.bonds) add_bond(b);
    // A species that only left-out rows named would be an unknown without evidence.
    drop_unused();
    group_copies(t_, out_);
    set_data();
    set_weights();
    return std::move(out_);
  }

 private:
  int unknown(const std::string& smiles) {
    const auto [it, added] = out_.at.try_emplace(key_of(smiles), static_cast<int>(out_.network.unknowns.size()));
    if (added) {
      const bool reference =
          std::find(kReferenceStates.begin(), kReferenceStates.end(), smiles) != kReferenceStates.end();
      out_.network.unknowns.push_back({smiles, reference ? std::optional(0.0) : std::nullopt});
    }
    return it->second;
  }

  void leave_out(const std::string& reason, const std::string& name) {
    auto& l = out_.left_out[reason];
    ++l.count;
    l.rows.push_back(name);
  }

  void observe(std::string name, LinearForm terms, double value, double u, NetworkRow row) {
    const auto open = [&](const NetworkTerm& x) { return !out_.network.unknowns[at(x.unknown)].fixed; };
    if (std::none_of(terms.begin(), terms.end(), open)) {
      leave_out("zero by definition", name);
      return;
    }
    out_.network.observations.push_back({std::move(name), std::move(terms), value, u, -1});
    out_.rows.push_back(row);
  }

  const std::string& source(int i) const { return t_.sources[at(i)].id; }

  void add_species(const SpeciesEntry& s) {
    for (const int i : s.rows) {
      const auto& r = t_.species_rows[at(i)];
      if (r.superseded || !r.dfh298) continue;
      auto name = fmt::format("dfH {} ({})", s.smiles, source(r.source));
      if (s.phase != "g") {
        leave_out("not a gas", name);
        continue;
      }
      const int x = unknown(s.smiles);
      combined_.emplace(x, s.combined->value);
      if (*r.u == 0 && !out_.network.unknowns[at(x)].fixed) {
        leave_out("u is zero and the species is no reference state", name);
        continue;
      }
      given_.insert({r.source, x});
      observe(std::move(name), {{x, 1}}, *r.dfh298, *r.u, {RowUse::enthalpy, i, r.source, x});
    }
  }

  void add_bond(const BondEntry& b) {
    const int m = unknown(b.molecule), radical = unknown(b.radical), leaving = unknown(b.leaving);
    for (const int i : b.rows) {
      const auto& r = t_.bond_rows[at(i)];
      if (r.superseded) continue;
      auto name = fmt::format("D {} > {} + {} ({})", b.molecule, b.radical, b.leaving, source(r.source));
      if (r.method == "derived" || r.note.find("derived from formation enthalpies") != std::string::npos) {
        add_derived(std::move(name), b, i, m, radical, leaving);
      } else {
        add_energy(std::move(name), i, m, radical, leaving);
      }
    }
  }

  void add_energy(std::string name, int i, int m, int radical, int leaving) {
    const auto& r = t_.bond_rows[at(i)];
    LinearForm terms{{radical, 1}, {leaving, 1}, {m, -1}};
    if (radical == leaving) terms = {{radical, 2}, {m, -1}};
    observe(std::move(name), std::move(terms), r.d298, r.u, {RowUse::bond, i, r.source, radical});
  }

  // A bond energy worked out from formation enthalpies says nothing beyond them: the radical's enthalpy is the
  // evidence, and it comes in once per source.
  void add_derived(std::string name, const BondEntry& b, int i, int m, int radical, int leaving) {
    const auto& r = t_.bond_rows[at(i)];
    if (given_.contains({r.source, radical})) {
      leave_out("its source gives the enthalpy of the radical itself", name);
      return;
    }
    if (const auto dfh = enthalpy_in_note(r.note); dfh && fits(*dfh, r.d298, m, leaving)) {
      given_.insert({r.source, radical});
      observe(fmt::format("dfH {} ({} by {}-{})", b.radical, source(r.source), b.molecule, b.leaving), {{radical, 1}},
              *dfh, r.u, {RowUse::bond_enthalpy, i, r.source, radical});
      return;
    }
    if (given_.contains({r.source, m})) {
      leave_out("its source gives the enthalpy of the molecule, the rest is of others", name);
      return;
    }
    if (r.note.find("dfH(R)+dfH(X)-dfH(RX)") != std::string::npos) {
      leave_out("sum of enthalpies that the table holds, or holds not to be independent", name);
      return;
    }
    add_energy(std::move(name), i, m, radical, leaving);
  }

  // "dHf(R) 121.0", "dHf(1-Ad) 12 kcal/mol", "dfH298(CH2OH) -18.9": the first enthalpy a note names, unless it is that
  // of a molecule or an atom.
  static std::optional<double> enthalpy_in_note(const std::string& note) {
    for (const std::string mark : {"dHf(", "dfH298("}) {
      auto from = note.find(mark);
      if (from == std::string::npos) continue;
      const auto close = note.find(')', from);
      if (close == std::string::npos) continue;
      const auto what = note.substr(from + mark.size(), close - from - mark.size());
      if (what == "RX" || what == "RH" || what == "X" || what == "H") continue;
      from = note.find_first_not_of(" =", close + 1);
      if (from == std::string::npos) continue;
      auto to = from + (note[from] == '-' ? 1 : 0);
      while (to < note.size() && (std::isdigit(static_cast<unsigned char>(note[to])) != 0 || note[to] == '.')) ++to;
      const auto value = parse_number(note.substr(from, to - from));
      if (!value.ok()) continue;
      return value.value() * (note.compare(to, 9, " kcal/mol") == 0 ? kKjPerKcal : 1.0);
    }
    return std::nullopt;
  }

  bool fits(double dfh, double d, int m, int leaving) const {
    const auto x = combined_.find(m), y = combined_.find(leaving);
    return x == combined_.end() || y == combined_.end() || std::abs(dfh + y->second - x->second - d) <= kMisread;
  }

  void drop_unused() {
    std::vector<int> moved(out_.network.unknowns.size(), -1);
    for (const auto& o : out_.network.observations) {
      for (const auto& t : o.terms) moved[at(t.unknown)] = 0;
    }
    // Elements in their reference states stay: reactions ask for them.
    for (std::size_t i = 0; i < moved.size(); ++i) {
      if (out_.network.unknowns[i].fixed) moved[i] = 0;
    }
    std::vector<NetworkUnknown> kept;
    for (std::size_t i = 0; i < moved.size(); ++i) {
      if (moved[i] < 0) continue;
      moved[i] = static_cast<int>(kept.size());
      kept.push_back(std::move(out_.network.unknowns[i]));
    }
    out_.network.unknowns = std::move(kept);
    for (auto& o : out_.network.observations) {
      for (auto& t : o.terms) t.unknown = moved[at(t.unknown)];
    }
    for (auto& r : out_.rows) r.about = moved[at(r.about)];
    std::erase_if(out_.at, [&](const auto& x) { return moved[at(x.second)] < 0; });
    for (auto& [key, x] : out_.at) x = moved[at(x)];
  }

  bool closed_shell(int x) const {
    const auto m = parse_smiles(out_.network.unknowns[at(x)].name, ParseMode::species);
    return m.ok() && m.value().unpaired() == 0;
  }

  void set_data() {
    auto& n = out_.network;
    out_.relative.assign(n.unknowns.size(), false);
    out_.datum.assign(n.unknowns.size(), -1);
    out_.weight.assign(n.unknowns.size(), 0.0);
    for (auto open = undetermined(n); !open.empty(); open = undetermined(n)) {
      std::set<int> touched;
      for (const auto& part : open) {
        if (std::any_of(part.begin(), part.end(), [&](int x) { return touched.contains(x); })) continue;
        touched.insert(part.begin(), part.end());
        const auto shell = std::find_if(part.begin(), part.end(), [&](int x) { return closed_shell(x); });
        const int datum = shell == part.end() ? part.front() : *shell;
        for (const int x : part) {
          out_.relative[at(x)] = true;
          out_.datum[at(x)] = datum;
        }
        out_.weight[at(datum)] = 1;
        n.unknowns[at(datum)].fixed = 0.0;
      }
    }
  }

  // Every observation of a part stays as it is when its datum moves: the weights follow one from the other.
  void set_weights() {
    std::vector<bool> open = out_.relative;
    for (std::size_t i = 0; i < open.size(); ++i) open[i] = open[i] && out_.weight[i] == 0;
    for (bool moved = true; moved;) {
      moved = false;
      for (const auto& o : out_.network.observations) {
        const NetworkTerm* last = nullptr;
        double sum = 0;
        int unknown = 0;
        for (const auto& t : o.terms) {
          if (open[at(t.unknown)]) last = &t, ++unknown;
          else sum += t.factor * out_.weight[at(t.unknown)];
        }
        if (unknown != 1) continue;
        out_.weight[at(last->unknown)] = -sum / last->factor;
        open[at(last->unknown)] = false;
        moved = true;
      }
    }
  }

  const Table& t_;
  EnthalpyNetwork out_;
  std::set<std::pair<int, int>> given_;  // source, unknown: the source's enthalpy is in
  std::map<int, double> combined_;       // by unknown, before drop_unused()
};

}  // namespace

int EnthalpyNetwork::find(const std::string& smiles) const {
  const auto it = at.find(key_of(smiles));
  return it == at.end() ? -1 : it->second;
}

LinearForm EnthalpyNetwork::bond_form(const BondEntry& bond) const {
  const int m = find(bond.molecule), radical = find(bond.radical), leaving = find(bond.leaving);
  if (m < 0 || radical < 0 || leaving < 0) return {};
  if (radical == leaving) return {{radical, 2}, {m, -1}};
  return {{radical, 1}, {leaving, 1}, {m, -1}};
}

EnthalpyNetwork enthalpy_network(const Table& table) { return Builder(table).build(); }

}  // namespace halostep
