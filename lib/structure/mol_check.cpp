#include <fmt/format.h>

#include <algorithm>
#include <set>
#include <utility>

#include "mol_fields.hpp"
#include "mol_record.hpp"

namespace halostep {
namespace {

// Fixed columns (BIOVIA, CTfile Formats): counts aaabbb..., atom x y z symbol, bond 111222tttsss.
class V2000 {
 public:
  V2000(const std::vector<std::string_view>& lines, MolRecord& out) : lines_(lines), out_(out) {}
  void run() {
    const auto atoms = integer(column(line(3), 0, 3)), bonds = integer(column(line(3), 3, 3));
    if (!atoms || !bonds || *atoms < 0 || *bonds < 0) {
      fail(ErrorClass::syntax, "the counts line holds no numbers of atoms and bonds", 3);
      return;
    }
    if (*atoms == 0) {
      fail(ErrorClass::empty, "no atoms", 3);
      return;
    }
    atoms_ = *atoms;
    const auto first_bond = 4 + static_cast<std::size_t>(atoms_);
    const auto first_property = first_bond + static_cast<std::size_t>(*bonds);
    bool good = true;
    for (std::size_t i = 4; i < first_bond && good; ++i) good = atom(i);
    for (std::size_t i = first_bond; i < first_property && good; ++i) good = bond(i);
    if (good) properties(first_property);
  }

 private:
  [[nodiscard]] std::string_view line(std::size_t i) const {
    return i < lines_.size() ? lines_[i] : std::string_view{};
  }
  bool fail(ErrorClass cls, std::string message, std::size_t i) {
    out_.error = Error{cls, std::move(message), line_place(std::min(i, lines_.size() - 1))};
    return false;
  }
  bool fail(const Error& e, std::size_t i) { return fail(e.cls, e.message, i); }
  // A number that may be left out.
  [[nodiscard]] std::optional<int> or_zero(std::size_t i, std::size_t from, std::size_t width) const {
    const auto field = column(line(i), from, width);
    return field.empty() ? 0 : integer(field);
  }
  bool atom(std::size_t i) {
    const auto x = real(column(line(i), 0, 10)), y = real(column(line(i), 10, 10)), z = real(column(line(i), 20, 10));
    const auto mass = or_zero(i, 34, 2), charge = or_zero(i, 36, 3), valence = or_zero(i, 48, 3);
    if (!x || !y || !z || !mass || !charge || !valence) {
      return fail(ErrorClass::syntax, fmt::format("atom line {} of {} is missing or broken", i - 3, atoms_), i);
    }
    MolAtom a;
    a.x = *x;
    a.y = *y;
    a.z = *z;
    a.mass_difference = *mass;
    a.line = static_cast<int>(i) + 1;
    if (auto e = set_symbol(a, column(line(i), 31, 3))) return fail(*e, i);
    if (auto e = set_property(a, "VAL", *valence == 15 ? -1 : *valence)) return fail(*e, i);
    // 1, 2, 3 are +3, +2, +1; 5, 6, 7 are -1, -2, -3; 4 is a radical.
    if (*charge == 4)
      a.radical = 2;
    else if (*charge >= 1 && *charge <= 7)
      a.charge = 4 - *charge;
    out_.atoms.push_back(a);
    return true;
  }
  bool bond(std::size_t i) {
    const auto a = integer(column(line(i), 0, 3)), b = integer(column(line(i), 3, 3)),
               type = integer(column(line(i), 6, 3));
    const auto stereo = or_zero(i, 9, 3);
    if (!a || !b || !type || !stereo) return fail(ErrorClass::syntax, "a bond line is missing or broken", i);
    for (const int k : {*a, *b}) {
      if (!known(k)) return fail(ErrorClass::syntax, fmt::format("a bond to atom {} of {}", k, atoms_), i);
    }
    if (*a == *b) return fail(ErrorClass::syntax, fmt::format("a bond of atom {} to itself", *a), i);
    if (!pairs_.insert(std::minmax(*a, *b)).second) {
      return fail(ErrorClass::syntax, "a second bond between the same atoms", i);
    }
    if (auto e = bond_fault(*type)) return fail(*e, i);
    const auto drawn = *stereo == 1   ? Drawn::up
                       : *stereo == 6 ? Drawn::down
                       : *stereo == 0 ? Drawn::plain
                                      : Drawn::either;
    out_.bonds.push_back({*a - 1, *b - 1, *type, drawn});
    return true;
  }
  void properties(std::size_t i) {
    for (; i < lines_.size(); ++i) {
      if (lines_[i].starts_with("M  END")) return;
      if (!property(i)) return;
      if (lines_[i].starts_with("A  ") || lines_[i].starts_with("G  ")) ++i;  // the text is on the next line
    }
    fail(ErrorClass::syntax, "no 'M  END' line", lines_.size() - 1);
  }
  // "M  CHG  2   1   1   4  -1": the number of pairs, then atom and value of each.
  bool property(std::size_t i) {
    const auto name = line(i).substr(0, 6);
    for (const auto* query : {"M  ALS", "M  RGP", "M  UNS", "M  RBC", "M  SUB", "M  LIN"}) {
      if (name == query) return fail(ErrorClass::wildcard, "a query is no definite structure", i);
    }
    const bool charge = name == "M  CHG" || name == "M  RAD";
    if (!charge && name != "M  ISO") return true;
    if (charge && !std::exchange(charges_, true)) {  // these replace the codes of the atom lines
      for (auto& a : out_.atoms) a.charge = a.radical = 0;
    }
    const auto pairs = integer(column(line(i), 6, 3));
    if (!pairs || *pairs < 0) return fail(ErrorClass::syntax, "a property line without its count", i);
    for (int k = 0; k < *pairs; ++k) {
      const auto at = 9 + 8 * static_cast<std::size_t>(k);
      const auto which = integer(column(line(i), at, 4)), value = integer(column(line(i), at + 4, 4));
      if (!which || !value) return fail(ErrorClass::syntax, "a property line shorter than its count", i);
      if (!known(*which))
        return fail(ErrorClass::syntax, fmt::format("a property of atom {} of {}", *which, atoms_), i);
      if (auto e = set_property(out_.atoms[static_cast<std::size_t>(*which) - 1], name.substr(3), *value))
        return fail(*e, i);
    }
    return true;
  }
  [[nodiscard]] bool known(int k) const { return k >= 1 && k <= atoms_; }

  const std::vector<std::string_view>& lines_;
  MolRecord& out_;
  int atoms_ = 0;
  bool charges_ = false;
  std::set<std::pair<int, int>> pairs_;
};

// "V2000" at the end of the counts line; files from before there were versions have none.
std::string_view version(std::string_view counts) {
  const auto text = column(counts, 0, counts.size());
  const auto word = text.substr(text.find_last_of(" \t") + 1);
  return word.starts_with('V') || word.starts_with('v') ? word : std::string_view{};
}

}  // namespace

MolRecord read_mol_record(const std::vector<std::string_view>& lines) {
  MolRecord out;
  if (!lines.empty() && (lines[0].starts_with("$RXN") || lines[0].starts_with("$RDFILE"))) {
    out.error = Error{ErrorClass::reaction, "a reaction file where molecules are meant", line_place(0)};
  } else if (lines.size() < 4) {
    out.error = Error{ErrorClass::syntax, "the record ends before its counts line",
                      line_place(lines.empty() ? 0 : lines.size() - 1)};
  } else if (const auto v = version(lines[3]); v == "V3000") {
    read_v3000(lines, out);
  } else if (v.empty() || v == "V2000") {
    V2000(lines, out).run();
  } else {
    out.error = Error{ErrorClass::syntax, fmt::format("version {} of the MOL format is not read: V2000 or V3000", v),
                      line_place(3)};
  }
  return out;
}

}  // namespace halostep
