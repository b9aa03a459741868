#include <fmt/format.h>

#include <algorithm>
#include <set>
#include <unordered_map>
#include <utility>

#include "mol_fields.hpp"
#include "mol_record.hpp"

namespace halostep {
namespace {

using Words = std::vector<std::string_view>;

Words split(std::string_view text) {
  Words out;
  for (std::size_t i = text.find_first_not_of(" \t"); i != std::string_view::npos;) {
    const auto end = std::min(text.find_first_of(" \t", i), text.size());
    out.push_back(text.substr(i, end - i));
    i = text.find_first_not_of(" \t", end);
  }
  return out;
}

// "CHG=-1" -> CHG and -1.
std::pair<std::string_view, std::optional<int>> named(std::string_view word) {
  const auto equals = word.find('=');
  if (equals == std::string_view::npos) return {word, std::nullopt};
  return {word.substr(0, equals), integer(word.substr(equals + 1))};
}

bool is_one_of(std::string_view word, std::initializer_list<std::string_view> names) {
  return std::find(names.begin(), names.end(), word) != names.end();
}

// Lines "M  V30 ..." of words, in blocks (BIOVIA, CTfile Formats); a line that ends with '-' goes on in the next.
class V3000 {
 public:
  V3000(const std::vector<std::string_view>& lines, MolRecord& out) : lines_(lines), out_(out) {}
  void run() {
    for (std::size_t i = 4; i < lines_.size(); ++i) {
      at_ = i;
      if (lines_[i].starts_with("M  END")) return finish();
      if (!lines_[i].starts_with("M  V30 ")) {
        fail(ErrorClass::syntax, "neither 'M  V30' nor 'M  END'");
        return;
      }
      Words words = split(lines_[i].substr(7));
      while (!words.empty() && words.back().ends_with('-') && i + 1 < lines_.size() &&
             lines_[i + 1].starts_with("M  V30 ")) {
        if (words.back() != "-") {
          fail(ErrorClass::syntax, "a word is cut by the end of the line");
          return;
        }
        words.pop_back();
        const Words more = split(lines_[++i].substr(7));
        words.insert(words.end(), more.begin(), more.end());
      }
      if (!line(words)) return;
    }
    at_ = lines_.size() - 1;
    fail(ErrorClass::syntax, "no 'M  END' line");
  }

 private:
  bool fail(ErrorClass cls, std::string message) {
    out_.error = Error{cls, std::move(message), line_place(at_)};
    return false;
  }
  bool fail(const Error& e) { return fail(e.cls, e.message); }
  bool line(const Words& w) {
    if (w.empty()) return true;
    if (w[0] == "BEGIN" || w[0] == "END") return begin_or_end(w);
    if (block_ == "ATOM") return atom(w);
    if (block_ == "BOND") return bond(w);
    if (block_ == "CTAB" && w[0] == "COUNTS") return counts(w);
    return true;
  }
  bool begin_or_end(const Words& w) {
    if (w.size() < 2) return fail(ErrorClass::syntax, "BEGIN or END of what?");
    if (is_one_of(w[1], {"RGROUP", "TEMPLATE"})) return fail(ErrorClass::wildcard, "a query is no definite structure");
    const bool begin = w[0] == "BEGIN", inner = w[1] != "CTAB";
    if (begin && inner && atoms_ == kNone) return fail(ErrorClass::syntax, "no COUNTS line before this block");
    block_ = begin ? w[1] : inner ? "CTAB" : "";
    return true;
  }
  bool counts(const Words& w) {
    const auto a = w.size() > 1 ? integer(w[1]) : std::nullopt, b = w.size() > 2 ? integer(w[2]) : std::nullopt;
    if (!a || !b || *a < 0 || *b < 0)
      return fail(ErrorClass::syntax, "the COUNTS line holds no numbers of atoms and bonds");
    if (*a == 0) return fail(ErrorClass::empty, "no atoms");
    atoms_ = static_cast<std::size_t>(*a);
    bonds_ = static_cast<std::size_t>(*b);
    return true;
  }
  // index type x y z aamap [CHG=] [RAD=] [MASS=] [VAL=] ...
  bool atom(const Words& w) {
    const auto number = integer(w[0]);
    if (!number || *number < 1) return fail(ErrorClass::syntax, "an atom line without its number");
    MolAtom a;
    if (w.size() > 1) {  // an atom list has blanks in it: look at the symbol before counting fields
      if (w[1].starts_with("NOT")) return fail(ErrorClass::wildcard, "an atom list is no atom");
      if (auto e = set_symbol(a, w[1])) return fail(*e);
    }
    const auto coordinate = [&](std::size_t k) { return k < w.size() ? real(w[k]) : std::nullopt; };
    const auto x = coordinate(2), y = coordinate(3), z = coordinate(4);
    if (w.size() < 6 || !x || !y || !z) return fail(ErrorClass::syntax, fmt::format("atom {} is broken", *number));
    a.x = *x;
    a.y = *y;
    a.z = *z;
    a.line = static_cast<int>(at_) + 1;
    for (std::size_t k = 6; k < w.size(); ++k) {
      const auto [name, value] = named(w[k]);
      if (is_one_of(name, {"RBCNT", "SUBST", "UNSAT"}))
        return fail(ErrorClass::wildcard, "a query is no definite structure");
      if (!is_one_of(name, {"CHG", "RAD", "MASS", "VAL"})) continue;
      if (!value) return fail(ErrorClass::syntax, fmt::format("'{}' holds no number", w[k]));
      if (auto e = set_property(a, name, *value)) return fail(*e);
    }
    if (!index_.emplace(*number, static_cast<int>(out_.atoms.size())).second) {
      return fail(ErrorClass::syntax, fmt::format("two atoms with number {}", *number));
    }
    out_.atoms.push_back(a);
    return true;
  }
  // index type atom1 atom2 [CFG=] ...
  bool bond(const Words& w) {
    int field[4] = {};
    for (std::size_t k = 0; k < 4; ++k) {
      const auto value = k < w.size() ? integer(w[k]) : std::nullopt;
      if (!value) return fail(ErrorClass::syntax, "a bond line is broken");
      field[k] = *value;
    }
    const auto a = index_.find(field[2]), b = index_.find(field[3]);
    if (a == index_.end() || b == index_.end()) {
      return fail(ErrorClass::syntax,
                  fmt::format("a bond to atom {}, which is not there", a == index_.end() ? field[2] : field[3]));
    }
    if (field[2] == field[3]) return fail(ErrorClass::syntax, fmt::format("a bond of atom {} to itself", field[2]));
    if (!pairs_.insert(std::minmax(field[2], field[3])).second) {
      return fail(ErrorClass::syntax, "a second bond between the same atoms");
    }
    if (auto e = bond_fault(field[1])) return fail(*e);
    MolBond out{a->second, b->second, field[1], Drawn::plain};
    for (std::size_t k = 4; k < w.size(); ++k) {
      const auto [name, value] = named(w[k]);
      if (name == "CFG")
        out.drawn = value == 1 ? Drawn::up : value == 2 ? Drawn::either : value == 3 ? Drawn::down : Drawn::plain;
    }
    out_.bonds.push_back(out);
    return true;
  }
  void finish() {
    if (atoms_ == kNone) {
      fail(ErrorClass::syntax, "no COUNTS line");
    } else if (atoms_ != out_.atoms.size()) {
      fail(ErrorClass::syntax, fmt::format("{} atoms where {} are announced", out_.atoms.size(), atoms_));
    } else if (bonds_ != out_.bonds.size()) {
      fail(ErrorClass::syntax, fmt::format("{} bonds where {} are announced", out_.bonds.size(), bonds_));
    }
  }

  static constexpr std::size_t kNone = static_cast<std::size_t>(-1);
  const std::vector<std::string_view>& lines_;
  MolRecord& out_;
  std::size_t at_ = 0, atoms_ = kNone, bonds_ = 0;
  std::string_view block_;
  std::unordered_map<int, int> index_;  // number in the file -> index
  std::set<std::pair<int, int>> pairs_;
};

}  // namespace

void read_v3000(const std::vector<std::string_view>& lines, MolRecord& out) { V3000(lines, out).run(); }

}  // namespace halostep
