#include "tables/read_bonds.hpp"

#include <array>

#include "tables/balance.hpp"

namespace halostep {
namespace {

constexpr const char* kHydrogen = "[H]";
constexpr Range kHydrogenBond{200, 620}, kOtherBond{50, 700};
constexpr double kMaxU = 40;

class BondReader {
 public:
  BondReader(Table& table, SourceBook& sources, Structures& structures, Faults& faults)
      : table_(table), sources_(sources), structures_(structures), faults_(faults) {}

  std::size_t read(const std::string& dir, const std::string& file, bool hydrogen) {
    std::vector<std::string> columns = {"molecule", "radical",    "d298",   "unit",   "u",      "coverage",
                                        "method",   "provenance", "source", "status", "reason", "note"};
    if (!hydrogen) columns.emplace_back("leaving");
    const auto sheet = read_sheet(dir, file, columns, faults_);
    for (std::size_t i = 0; i < sheet.lines.size(); ++i) read_row(Row(sheet, i, faults_), hydrogen);
    return sheet.lines.size();
  }

  void combine() { combine_bonds(table_, keys_, places_, faults_); }

 private:
  void read_row(const Row& row, bool hydrogen) {
    BondRow r;
    r.molecule = row.text("molecule");
    r.radical = row.text("radical");
    r.leaving = hydrogen ? kHydrogen : row.text("leaving");
    read_energy(row, hydrogen ? kHydrogenBond : kOtherBond, r);
    r.coverage = row.word("coverage", words::coverage);
    read_evidence(row, sources_, r);
    auto key = hydrogen ? hydrogen_key(row) : other_key(row);
    if (r.d298 == 0 || r.u == 0) key = {};  // told already; must not spoil its bond's other rows
    if (!key.molecule.empty()) {
      duplicates_.check(row, fmt::format("{} {} {} {} {}", key.molecule, key.radical, key.leaving, r.d298, r.source));
    }
    keys_.push_back(std::move(key));
    places_.push_back(row.place());
    table_.bond_rows.push_back(std::move(r));
  }

  /// d298 and u in kJ/mol; the limits are those of kJ/mol, so the unit is read first.
  static void read_energy(const Row& row, Range range, BondRow& r) {
    const auto& unit = row.word("unit", words::energy);
    if (unit != "kJ/mol" && unit != "kcal/mol") return;
    const double scale = unit == "kcal/mol" ? kKjPerKcal : 1.0;
    range.lo /= scale;
    range.hi /= scale;
    r.d298 = row.needed_number("d298", range) * scale;
    r.u = row.needed_number("u", {0, kMaxU / scale, true}) * scale;
  }

  BondKey hydrogen_key(const Row& row) {
    const auto* m = structures_.in(row, "molecule");
    const auto* radical = structures_.in(row, "radical");
    if (m == nullptr || radical == nullptr) return {};
    const int site = radical_site(row, *m, *radical);
    if (site < 0) return {};
    return {m->canonical, canonical_smiles(m->m.without_hydrogen(site), false), kHydrogen};
  }

  BondKey other_key(const Row& row) {
    const auto* m = structures_.in(row, "molecule");
    const auto* radical = structures_.in(row, "radical");
    const auto* leaving = structures_.in(row, "leaving");
    if (m == nullptr || radical == nullptr || leaving == nullptr) return {};
    const std::array whole = {m->m};
    const std::array parts = {radical->m, leaving->m};
    if (const auto why = imbalance(whole, parts)) {
      row.fault(fmt::format("the parts do not add up to the molecule: {}", *why));
      return {};
    }
    const auto broken = broken_into(m->m, radical->m, leaving->m);
    const bool electrons = radical->m.unpaired() + leaving->m.unpaired() == m->m.unpaired() + 2;
    if (!broken || !electrons) {
      row.fault(fmt::format("no acyclic single bond of {} gives {} and {}", m->canonical, radical->canonical,
                            leaving->canonical));
      return {};
    }
    BondKey key{m->canonical, canonical_smiles(broken->first, false), canonical_smiles(broken->second, false)};
    // One bond, whichever part a row names first.
    if (const BondKey reversed{key.molecule, key.leaving, key.radical}; other_.contains(reversed)) return reversed;
    other_.insert(key);
    return key;
  }

  Table& table_;
  SourceBook& sources_;
  Structures& structures_;
  Faults& faults_;
  Duplicates duplicates_;
  std::set<BondKey> other_;
  std::vector<BondKey> keys_;
  std::vector<RowPlace> places_;
};

}  // namespace

BondCounts read_bonds(const std::string& dir, Table& table, SourceBook& sources, Structures& structures,
                      Faults& faults) {
  BondReader reader(table, sources, structures, faults);
  BondCounts n;
  n.rh = reader.read(dir, "bonds_rh.csv", true);
  n.rx = reader.read(dir, "bonds_rx.csv", false);
  reader.combine();
  return n;
}

}  // namespace halostep
