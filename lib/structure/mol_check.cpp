#include "mol_check.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <set>
#include <utility>

#include "mol_check_v3000.hpp"
#include "mol_fields.hpp"

namespace halostep {
namespace {

// Fixed columns (BIOVIA, CTfile Formats): counts aaabbb..., atom x y z symbol, bond 111222ttt.
class V2000 {
 public:
  V2000(const std::vector<std::string_view>& lines, MolCheck& out) : lines_(lines), out_(out) {}
  void run() {
    const std::string_view counts = lines_[3];
    const auto atoms = integer(column(counts, 0, 3)), bonds = integer(column(counts, 3, 3));
    if (!atoms || !bonds || *atoms < 0 || *bonds < 0)
      return void(fail(ErrorClass::syntax, "the counts line holds no numbers of atoms and bonds", 3));
    if (*atoms == 0) return void(fail(ErrorClass::empty, "no atoms", 3));
    atoms_ = *atoms;
    const auto first_bond = 4 + static_cast<std::size_t>(atoms_);
    const auto first_property = first_bond + static_cast<std::size_t>(*bonds);
    for (std::size_t i = 4; i < first_bond; ++i) {
      if (!atom(i)) return;
    }
    for (std::size_t i = first_bond; i < first_property; ++i) {
      if (!bond(i)) return;
    }
    for (std::size_t i = first_property; i < lines_.size(); ++i) {
      if (lines_[i].starts_with("M  END")) return;
      if (!property(i)) return;
      if (lines_[i].starts_with("A  ") || lines_[i].starts_with("G  ")) ++i;  // the text is on the next line
    }
    fail(ErrorClass::syntax, "no 'M  END' line", lines_.size() - 1);
  }

 private:
  bool fail(ErrorClass cls, std::string message, std::size_t i) {
    out_.error = Error{cls, std::move(message), line_place(std::min(i, lines_.size() - 1))};
    return false;
  }
  bool atom(std::size_t i) {
    const std::string_view line = i < lines_.size() ? lines_[i] : std::string_view{};
    const auto mass = column(line, 34, 2), charge = column(line, 36, 3);
    if (!real(column(line, 0, 10)) || !real(column(line, 10, 10)) || !real(column(line, 20, 10)) ||
        (!mass.empty() && !integer(mass)) || (!charge.empty() && !integer(charge))) {
      return fail(ErrorClass::syntax, fmt::format("atom line {} of {} is missing or broken", i - 3, atoms_), i);
    }
    if (auto e = symbol_fault(column(line, 31, 3))) return fail(e->cls, e->message, i);
    out_.atom_line.push_back(static_cast<int>(i) + 1);
    return true;
  }
  bool bond(std::size_t i) {
    const std::string_view line = i < lines_.size() ? lines_[i] : std::string_view{};
    const auto a = integer(column(line, 0, 3)), b = integer(column(line, 3, 3)), order = integer(column(line, 6, 3));
    if (!a || !b || !order) return fail(ErrorClass::syntax, "a bond line is missing or broken", i);
    for (const int k : {*a, *b}) {
      if (!known(k)) return fail(ErrorClass::syntax, fmt::format("a bond to atom {} of {}", k, atoms_), i);
    }
    if (*a == *b) return fail(ErrorClass::syntax, fmt::format("a bond of atom {} to itself", *a), i);
    if (!pairs_.insert(std::minmax(*a, *b)).second)
      return fail(ErrorClass::syntax, "a second bond between the same atoms", i);
    if (auto e = bond_fault(*order)) return fail(e->cls, e->message, i);
    return true;
  }
  // "M  CHG  2   1   1   4  -1": the number of pairs, then atom and value of each.
  bool property(std::size_t i) {
    const std::string_view line = lines_[i], name = line.substr(0, 6);
    for (const auto* query : {"M  ALS", "M  RGP", "M  UNS", "M  RBC", "M  SUB", "M  LIN"}) {
      if (name == query) return fail(ErrorClass::wildcard, "a query is no definite structure", i);
    }
    const bool charges = name == "M  CHG";
    if (!charges && name != "M  RAD" && name != "M  ISO") return true;
    const auto pairs = integer(column(line, 6, 3));
    if (!pairs || *pairs < 0) return fail(ErrorClass::syntax, "a property line without its count", i);
    for (int k = 0; k < *pairs; ++k) {
      const auto at = 9 + 8 * static_cast<std::size_t>(k);
      const auto which = integer(column(line, at, 4)), value = integer(column(line, at + 4, 4));
      if (!which || !value) return fail(ErrorClass::syntax, "a property line shorter than its count", i);
      if (!known(*which))
        return fail(ErrorClass::syntax, fmt::format("a property of atom {} of {}", *which, atoms_), i);
      if (auto e = property_fault(name.substr(3), *value)) return fail(e->cls, e->message, i);
    }
    return true;
  }
  [[nodiscard]] bool known(int k) const { return k >= 1 && k <= atoms_; }

  const std::vector<std::string_view>& lines_;
  MolCheck& out_;
  int atoms_ = 0;
  std::set<std::pair<int, int>> pairs_;
};

}  // namespace

MolCheck check_mol(const std::vector<std::string_view>& lines) {
  MolCheck out;
  if (!lines.empty() && (lines[0].starts_with("$RXN") || lines[0].starts_with("$RDFILE"))) {
    out.error = Error{ErrorClass::reaction, "a reaction file where molecules are meant", line_place(0)};
  } else if (lines.size() < 4) {
    out.error = Error{ErrorClass::syntax, "the record ends before its counts line",
                      line_place(lines.empty() ? 0 : lines.size() - 1)};
  } else if (lines[3].find("V3000") != std::string_view::npos) {
    check_v3000(lines, out);
  } else {
    V2000(lines, out).run();
  }
  return out;
}

}  // namespace halostep
