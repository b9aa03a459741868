#include "mol_fields.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <charconv>
#include <cmath>

#include "halostep/molecule.hpp"

namespace halostep {
namespace {

constexpr int kLargestCharge = 4;  // as in SMILES

template <class T>
std::optional<T> number(std::string_view field) {
  if (field.starts_with('+') && !field.starts_with("+-")) field.remove_prefix(1);
  T value{};
  const auto [end, fault] = std::from_chars(field.data(), field.data() + field.size(), value);
  if (fault != std::errc{} || end != field.data() + field.size()) return std::nullopt;
  return value;
}

bool is_query(std::string_view symbol) {
  static constexpr std::string_view kQuery[] = {"A", "AH", "Q", "QH", "X",  "XH", "M",   "MH",
                                                "L", "LP", "*", "R",  "R#", "?",  "Pol", "Mod"};
  const bool numbered =
      symbol.size() > 1 && symbol[0] == 'R' && std::isdigit(static_cast<unsigned char>(symbol[1])) != 0;
  return numbered || symbol[0] == '[' || symbol[0] == '\'' ||
         std::find(std::begin(kQuery), std::end(kQuery), symbol) != std::end(kQuery);
}

}  // namespace

std::string_view column(std::string_view line, std::size_t from, std::size_t width) {
  if (from >= line.size()) return {};
  const auto field = line.substr(from, width);
  const auto first = field.find_first_not_of(" \t");
  if (first == std::string_view::npos) return {};
  return field.substr(first, field.find_last_not_of(" \t") - first + 1);
}

std::optional<int> integer(std::string_view field) { return number<int>(field); }

std::optional<double> real(std::string_view field) {
  const auto x = number<double>(field);
  return x && std::abs(*x) < 99999 ? x : std::nullopt;  // what ten columns with four decimals hold
}

std::string line_place(std::size_t index) { return fmt::format("line {}", index + 1); }

std::optional<Error> set_symbol(MolAtom& atom, std::string_view symbol) {
  if (symbol.empty()) return Error{ErrorClass::syntax, "an atom without a symbol", {}};
  if (is_query(symbol)) return Error{ErrorClass::wildcard, fmt::format("'{}' is a query, no atom", symbol), {}};
  atom.symbol = symbol;
  if (symbol == "D" || symbol == "T") {
    atom.symbol = "H";
    atom.isotope = symbol == "D" ? 2 : 3;
  } else if (std::isupper(static_cast<unsigned char>(symbol[0])) == 0 || element_number(symbol) == 0) {
    return Error{ErrorClass::element, fmt::format("'{}' is no element", symbol), {}};
  }
  return std::nullopt;
}

std::optional<Error> set_property(MolAtom& atom, std::string_view name, int value) {
  if (name == "CHG") {
    if (std::abs(value) > kLargestCharge)
      return Error{ErrorClass::charge, fmt::format("a charge of {:+d} is absurd", value), {}};
    atom.charge = value;
  } else if (name == "RAD") {
    if (value == 1) return Error{ErrorClass::radical, "a singlet diradical is not covered", {}};
    if (value < 0 || value > 3) return Error{ErrorClass::syntax, fmt::format("no such radical: {}", value), {}};
    atom.radical = value;
  } else if (name == "ISO" || name == "MASS") {
    if (value < 1 || value > 400) return Error{ErrorClass::syntax, fmt::format("no such mass number: {}", value), {}};
    atom.isotope = value;
  } else if (name == "VAL") {
    if (value < -1 || value > 14) return Error{ErrorClass::syntax, fmt::format("no such valence: {}", value), {}};
    if (value != 0) atom.valence = std::max(value, 0);  // 0 says nothing, -1 says none
  }
  return std::nullopt;
}

std::optional<Error> bond_fault(int type) {
  if (type >= 1 && type <= 4) return std::nullopt;
  if (type >= 5 && type <= 8) return Error{ErrorClass::wildcard, fmt::format("bond type {} is a query", type), {}};
  if (type == 9 || type == 10)
    return Error{ErrorClass::domain, fmt::format("bond type {} is no covalent bond", type), {}};
  return Error{ErrorClass::syntax, fmt::format("no such bond type: {}", type), {}};
}

}  // namespace halostep
