#include "smiles_check.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <map>
#include <utility>

#include "halostep/molecule.hpp"

namespace halostep {
namespace {

bool digit(char c) { return c >= '0' && c <= '9'; }
bool bond_char(char c) { return c == '-' || c == '=' || c == '#' || c == ':' || c == '/' || c == '\\' || c == '$'; }

class Scanner {
 public:
  explicit Scanner(std::string_view t) : t_(t) {}
  SmilesCheck run();

 private:
  [[nodiscard]] char at(std::size_t i) const { return i < t_.size() ? t_[i] : '\0'; }
  bool fail(ErrorClass c, std::string message, std::size_t where) {
    if (!out_.error) out_.error = Error{c, std::move(message), place_in(t_, where)};
    return false;
  }
  bool step();
  bool bracket();
  bool organic();
  bool ring(int number, std::size_t where);
  bool atom(std::size_t where, bool aromatic);
  bool join(std::size_t bond, int a, int b);
  std::string_view t_;
  std::size_t i_ = 0;
  SmilesCheck out_;
  struct OpenRing {
    std::size_t where = 0;
    int atom = 0;
    std::size_t bond_at = std::string_view::npos;
  };
  int last_ = -1;                                 // atom the next bond starts from
  std::size_t bond_at_ = std::string_view::npos;  // pending bond character
  std::vector<bool> aromatic_;                    // of each atom, as written
  std::vector<std::pair<std::size_t, int>> branches_;
  std::map<int, OpenRing> open_;
};

// ':' joins two aromatic atoms (OpenSMILES 1.0, section 3.2.2; from memory).
bool Scanner::join(std::size_t bond, int a, int b) {
  if (at(bond) != ':' || (aromatic_[static_cast<std::size_t>(a)] && aromatic_[static_cast<std::size_t>(b)])) return true;
  return fail(ErrorClass::aromaticity, "an aromatic bond ':' at an atom that is not written aromatic", bond);
}

bool Scanner::atom(std::size_t where, bool aromatic) {
  const int before = last_;
  out_.atom_position.push_back(where);
  aromatic_.push_back(aromatic);
  last_ = static_cast<int>(out_.atom_position.size()) - 1;
  const std::size_t bond = std::exchange(bond_at_, std::string_view::npos);
  return before < 0 || join(bond, before, last_);
}

bool Scanner::ring(int number, std::size_t where) {
  if (last_ < 0) return fail(ErrorClass::syntax, "a ring number without an atom before it", where);
  const std::size_t bond = std::exchange(bond_at_, std::string_view::npos);
  const auto it = open_.find(number);
  if (it == open_.end()) {
    open_[number] = {where, last_, bond};
    return true;
  }
  const OpenRing opened = it->second;
  open_.erase(it);
  if (opened.atom == last_) {
    return fail(ErrorClass::syntax, fmt::format("ring {} closes on its own atom", number), where);
  }
  return join(opened.bond_at, opened.atom, last_) && join(bond, opened.atom, last_);
}

bool Scanner::organic() {
  static constexpr std::string_view kOne = "BCNOPSFIbcnops";
  const char c = t_[i_];
  const std::size_t where = i_;
  if ((c == 'C' && at(i_ + 1) == 'l') || (c == 'B' && at(i_ + 1) == 'r')) {
    i_ += 2;
    return atom(where, false);
  }
  if (kOne.find(c) != std::string_view::npos) {
    ++i_;
    return atom(where, std::islower(static_cast<unsigned char>(c)) != 0);
  }
  if (std::isalpha(static_cast<unsigned char>(c))) {
    return fail(ErrorClass::element, fmt::format("'{}' is no element that may stand without brackets", c), where);
  }
  if (static_cast<unsigned char>(c) >= 0x80) return fail(ErrorClass::syntax, "a character that is not ASCII", where);
  return fail(ErrorClass::syntax, fmt::format("unexpected character '{}'", c), where);
}

bool Scanner::bracket() {
  const std::size_t open = i_++;
  while (digit(at(i_))) ++i_;
  const std::size_t name = i_;
  if (at(i_) == '*' || at(i_) == '?') return fail(ErrorClass::wildcard, "a wildcard is no atom", i_);
  if (!std::isalpha(static_cast<unsigned char>(at(i_)))) return fail(ErrorClass::syntax, "a bracket without an element", i_);
  std::size_t length = 1;
  if (std::isupper(static_cast<unsigned char>(at(i_))) && std::islower(static_cast<unsigned char>(at(i_ + 1))) &&
      element_number(t_.substr(i_, 2)) > 0) {
    length = 2;
  } else if (t_.substr(i_, 2) == "se" || t_.substr(i_, 2) == "as") {
    length = 2;
  }
  const auto symbol = t_.substr(i_, length);
  const bool aromatic = std::islower(static_cast<unsigned char>(symbol[0])) != 0;
  static constexpr std::string_view kAromatic = "bcnops";
  if (element_number(symbol) == 0 || (aromatic && length == 1 && kAromatic.find(symbol[0]) == std::string_view::npos)) {
    std::size_t end = i_ + length;  // the whole misspelt symbol: [Xx], not its X
    while (std::islower(static_cast<unsigned char>(at(end)))) ++end;
    return fail(ErrorClass::element, fmt::format("'{}' is no element", t_.substr(name, end - name)), name);
  }
  i_ += length;
  if (at(i_) == '@') {
    while (at(i_) == '@') ++i_;
    if (std::isupper(static_cast<unsigned char>(at(i_))) && at(i_) != 'H') {
      while (std::isalnum(static_cast<unsigned char>(at(i_)))) ++i_;
    }
  }
  if (at(i_) == 'H') {
    ++i_;
    while (digit(at(i_))) ++i_;
  }
  if (at(i_) == '+' || at(i_) == '-') {
    const std::size_t sign_at = i_;
    const char sign = at(i_);
    int charge = 0;
    while (at(i_) == sign) ++i_, ++charge;
    if (digit(at(i_))) {
      charge = 0;
      while (digit(at(i_)) && charge < 1000) charge = charge * 10 + (at(i_++) - '0');
    }
    if (charge > 4) return fail(ErrorClass::charge, fmt::format("a charge of {}{} is absurd", sign, charge), sign_at);
  }
  if (at(i_) == ':') {
    ++i_;
    if (!digit(at(i_))) return fail(ErrorClass::syntax, "an atom class needs a number", i_);
    while (digit(at(i_))) ++i_;
  }
  if (at(i_) != ']') {
    const bool ended = i_ >= t_.size() || t_.find(']', i_) == std::string_view::npos;
    if (ended) return fail(ErrorClass::syntax, "a bracket is not closed", open);
    // A letter here is most often a misspelt element.
    if (std::isalpha(static_cast<unsigned char>(at(i_)))) {
      return fail(ErrorClass::element, fmt::format("'{}' is no element", t_.substr(name, i_ + 1 - name)), name);
    }
    return fail(ErrorClass::syntax, fmt::format("unexpected character '{}' in a bracket", at(i_)), i_);
  }
  ++i_;
  return atom(open, aromatic);
}

bool Scanner::step() {
  const char c = t_[i_];
  if (c == '[') return bracket();
  if (c == '*') return fail(ErrorClass::wildcard, "a wildcard is no atom", i_);
  if (bond_char(c)) {
    if (last_ < 0) return fail(ErrorClass::syntax, "a bond without an atom before it", i_);
    if (bond_at_ != std::string_view::npos) return fail(ErrorClass::syntax, "two bonds in a row", i_);
    if (c == '$') return fail(ErrorClass::valence, "a quadruple bond", i_);
    bond_at_ = i_++;
    return true;
  }
  if (c == '(') {
    if (last_ < 0) return fail(ErrorClass::syntax, "a branch without an atom before it", i_);
    if (bond_at_ != std::string_view::npos) return fail(ErrorClass::syntax, "a bond that leads nowhere", bond_at_);
    if (at(i_ + 1) == ')') return fail(ErrorClass::syntax, "an empty branch", i_);
    // A branch begins with an atom, a bond or a dot (OpenSMILES 1.0, section 2; from memory).
    if (at(i_ + 1) == '(' || at(i_ + 1) == '%' || digit(at(i_ + 1))) {
      return fail(ErrorClass::syntax, "a branch begins with an atom", i_ + 1);
    }
    branches_.emplace_back(i_++, last_);
    return true;
  }
  if (c == ')') {
    if (branches_.empty()) return fail(ErrorClass::syntax, "')' without '('", i_);
    if (bond_at_ != std::string_view::npos) return fail(ErrorClass::syntax, "a bond that leads nowhere", bond_at_);
    last_ = branches_.back().second;
    branches_.pop_back();
    ++i_;
    return true;
  }
  if (digit(c)) {
    const std::size_t where = i_++;
    return ring(c - '0', where);
  }
  if (c == '%') {
    if (!digit(at(i_ + 1)) || !digit(at(i_ + 2))) return fail(ErrorClass::syntax, "'%' needs two digits", i_);
    const int number = (at(i_ + 1) - '0') * 10 + (at(i_ + 2) - '0');
    const std::size_t where = i_;
    i_ += 3;
    return ring(number, where);
  }
  if (c == '.') {
    if (last_ < 0 || bond_at_ != std::string_view::npos || i_ + 1 == t_.size()) {
      return fail(ErrorClass::syntax, "'.' needs a part on each side", i_);
    }
    last_ = -1;
    ++i_;
    return true;
  }
  return organic();
}

SmilesCheck Scanner::run() {
  while (i_ < t_.size() && step()) {}
  if (out_.error) return std::move(out_);
  if (bond_at_ != std::string_view::npos) fail(ErrorClass::syntax, "a bond that leads nowhere", bond_at_);
  if (!branches_.empty()) fail(ErrorClass::syntax, "a branch is not closed", branches_.back().first);
  if (!open_.empty()) {
    const auto first = std::min_element(open_.begin(), open_.end(),
                                        [](const auto& a, const auto& b) { return a.second.where < b.second.where; });
    fail(ErrorClass::syntax, fmt::format("ring {} is not closed", first->first), first->second.where);
  }
  return std::move(out_);
}

}  // namespace

std::string place_in(std::string_view text, std::size_t offset) {
  constexpr std::size_t kShown = 40;
  if (text.size() <= kShown) return fmt::format("position {} in '{}'", offset + 1, text);
  const std::size_t from = offset > kShown / 2 ? std::min(offset - kShown / 2, text.size() - kShown) : 0;
  return fmt::format("position {} in '{}{}{}'", offset + 1, from > 0 ? "..." : "", text.substr(from, kShown),
                     from + kShown < text.size() ? "..." : "");
}

SmilesCheck check_smiles(std::string_view text) { return Scanner(text).run(); }

}  // namespace halostep
