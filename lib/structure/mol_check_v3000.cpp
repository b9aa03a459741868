#include "mol_check_v3000.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <set>
#include <string>
#include <unordered_set>

#include "mol_fields.hpp"

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

class V3000 {
 public:
  V3000(const std::vector<std::string_view>& lines, MolCheck& out) : lines_(lines), out_(out) {}
  void run() {
    for (std::size_t i = 4; i < lines_.size(); ++i) {
      at_ = i;
      if (lines_[i].starts_with("M  END")) return finish();
      if (!lines_[i].starts_with("M  V30 ")) {
        fail(ErrorClass::syntax, "neither 'M  V30' nor 'M  END'");
        return;
      }
      std::string text(lines_[i].substr(7));
      while (text.ends_with('-') && i + 1 < lines_.size() && lines_[i + 1].starts_with("M  V30 ")) {
        text.pop_back();
        text += lines_[++i].substr(7);
      }
      if (!line(split(text))) return;
    }
    at_ = lines_.size() - 1;
    fail(ErrorClass::syntax, "no 'M  END' line");
  }

 private:
  bool fail(ErrorClass cls, std::string message) {
    out_.error = Error{cls, std::move(message), line_place(at_)};
    return false;
  }
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
    if (w[1] == "RGROUP" || w[1] == "TEMPLATE") return fail(ErrorClass::wildcard, "a query is no definite structure");
    const bool inner = w[1] != "CTAB";
    block_ = w[0] == "BEGIN" ? std::string(w[1]) : inner ? "CTAB" : "";
    if (w[0] == "BEGIN" && inner && atoms_ < 0) return fail(ErrorClass::syntax, "no COUNTS line before this block");
    return true;
  }
  bool counts(const Words& w) {
    const auto a = w.size() > 1 ? integer(w[1]) : std::nullopt, b = w.size() > 2 ? integer(w[2]) : std::nullopt;
    if (!a || !b || *a < 0 || *b < 0)
      return fail(ErrorClass::syntax, "the COUNTS line holds no numbers of atoms and bonds");
    if (*a == 0) return fail(ErrorClass::empty, "no atoms");
    atoms_ = *a;
    bonds_ = *b;
    return true;
  }
  // index type x y z aamap [CHG=] [RAD=] [MASS=] ...
  bool atom(const Words& w) {
    const auto index = integer(w[0]);
    if (!index || *index < 1) return fail(ErrorClass::syntax, "an atom line without its number");
    if (w.size() > 1) {  // an atom list has blanks in it: look at the symbol before counting fields
      if (w[1].starts_with("NOT")) return fail(ErrorClass::wildcard, "an atom list is no atom");
      if (auto e = symbol_fault(w[1])) return fail(e->cls, e->message);
    }
    if (w.size() < 6 || !real(w[2]) || !real(w[3]) || !real(w[4]))
      return fail(ErrorClass::syntax, fmt::format("atom {} is broken", *index));
    if (!index_.insert(*index).second) return fail(ErrorClass::syntax, fmt::format("two atoms with number {}", *index));
    for (std::size_t k = 6; k < w.size(); ++k) {
      const auto equals = w[k].find('=');
      const auto name = w[k].substr(0, equals);
      if (name == "RBCNT" || name == "SUBST" || name == "UNSAT")
        return fail(ErrorClass::wildcard, "a query is no definite structure");
      if (name != "CHG" && name != "RAD" && name != "MASS" && name != "VAL") continue;
      const auto value = equals == std::string_view::npos ? std::nullopt : integer(w[k].substr(equals + 1));
      if (!value) return fail(ErrorClass::syntax, fmt::format("'{}' holds no number", w[k]));
      if (auto e = property_fault(name, *value)) return fail(e->cls, e->message);
      // VAL=0 says nothing, -1 says none.
      if (name == "VAL" && *value != 0)
        out_.valence.emplace_back(static_cast<int>(out_.atom_line.size()), std::max(*value, 0));
    }
    out_.atom_line.push_back(static_cast<int>(at_) + 1);
    return true;
  }
  // index type atom1 atom2 ...
  bool bond(const Words& w) {
    int field[4] = {};
    for (std::size_t k = 0; k < 4; ++k) {
      const auto value = k < w.size() ? integer(w[k]) : std::nullopt;
      if (!value) return fail(ErrorClass::syntax, "a bond line is broken");
      field[k] = *value;
    }
    for (const int k : {field[2], field[3]}) {
      if (!index_.contains(k)) return fail(ErrorClass::syntax, fmt::format("a bond to atom {}, which is not there", k));
    }
    if (field[2] == field[3]) return fail(ErrorClass::syntax, fmt::format("a bond of atom {} to itself", field[2]));
    if (!pairs_.insert(std::minmax(field[2], field[3])).second) {
      return fail(ErrorClass::syntax, "a second bond between the same atoms");
    }
    if (auto e = bond_fault(field[1])) return fail(e->cls, e->message);
    if (field[1] == 2 && std::find(w.begin() + 4, w.end(), "CFG=2") != w.end()) out_.either.push_back(bonds_seen_);
    ++bonds_seen_;
    return true;
  }
  void finish() {
    if (atoms_ < 0) {
      fail(ErrorClass::syntax, "no COUNTS line");
    } else if (atoms_ != static_cast<int>(index_.size())) {
      fail(ErrorClass::syntax, fmt::format("{} atoms where {} are announced", index_.size(), atoms_));
    } else if (bonds_ != bonds_seen_) {
      fail(ErrorClass::syntax, fmt::format("{} bonds where {} are announced", bonds_seen_, bonds_));
    }
  }

  const std::vector<std::string_view>& lines_;
  MolCheck& out_;
  std::size_t at_ = 0;
  std::string block_;
  int atoms_ = -1, bonds_ = 0, bonds_seen_ = 0;
  std::unordered_set<int> index_;
  std::set<std::pair<int, int>> pairs_;
};

}  // namespace

void check_v3000(const std::vector<std::string_view>& lines, MolCheck& out) { V3000(lines, out).run(); }

}  // namespace halostep
