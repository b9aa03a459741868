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
  if (field.starts_with('+')) field.remove_prefix(1);
  T value{};
  const auto [end, fault] = std::from_chars(field.data(), field.data() + field.size(), value);
  if (fault != std::errc{} || end != field.data() + field.size()) return std::nullopt;
  return value;
}

}  // namespace

std::string_view column(std::string_view line, std::size_t from, std::size_t width) {
  if (from >= line.size()) return {};
  auto field = line.substr(from, width);
  const auto first = field.find_first_not_of(" \t");
  if (first == std::string_view::npos) return {};
  return field.substr(first, field.find_last_not_of(" \t") - first + 1);
}

std::optional<int> integer(std::string_view field) { return number<int>(field); }

std::optional<double> real(std::string_view field) {
  const auto x = number<double>(field);
  return x && std::isfinite(*x) ? x : std::nullopt;
}

std::string line_place(std::size_t index) { return fmt::format("line {}", index + 1); }

std::optional<Error> symbol_fault(std::string_view symbol) {
  static constexpr std::string_view kQuery[] = {"A", "AH", "Q", "QH", "X",  "XH", "M",   "MH",
                                                "L", "LP", "*", "R",  "R#", "?",  "Pol", "Mod"};
  if (symbol.empty()) return Error{ErrorClass::syntax, "an atom without a symbol", {}};
  const bool numbered =
      symbol.size() > 1 && symbol[0] == 'R' && std::isdigit(static_cast<unsigned char>(symbol[1])) != 0;
  if (numbered || symbol[0] == '[' || symbol[0] == '\'' ||
      std::find(std::begin(kQuery), std::end(kQuery), symbol) != std::end(kQuery)) {
    return Error{ErrorClass::wildcard, fmt::format("'{}' is a query, no atom", symbol), {}};
  }
  const bool upper = std::isupper(static_cast<unsigned char>(symbol[0])) != 0;
  const bool known = symbol == "D" || symbol == "T" || (upper && element_number(symbol) > 0);
  if (!known) return Error{ErrorClass::element, fmt::format("'{}' is no element", symbol), {}};
  return std::nullopt;
}

std::optional<Error> bond_fault(int order) {
  if (order >= 1 && order <= 4) return std::nullopt;
  if (order >= 5 && order <= 8) return Error{ErrorClass::wildcard, fmt::format("bond type {} is a query", order), {}};
  if (order == 9 || order == 10)
    return Error{ErrorClass::domain, fmt::format("bond type {} is no covalent bond", order), {}};
  return Error{ErrorClass::syntax, fmt::format("no such bond type: {}", order), {}};
}

std::optional<Error> property_fault(std::string_view name, int value) {
  if (name == "CHG" && std::abs(value) > kLargestCharge)
    return Error{ErrorClass::charge, fmt::format("a charge of {:+d} is absurd", value), {}};
  if (name == "RAD" && value == 1) return Error{ErrorClass::radical, "a singlet diradical is not covered", {}};
  if (name == "RAD" && (value < 0 || value > 3))
    return Error{ErrorClass::syntax, fmt::format("no such radical: {}", value), {}};
  if ((name == "ISO" || name == "MASS") && (value < 1 || value > 400)) {
    return Error{ErrorClass::syntax, fmt::format("no such mass number: {}", value), {}};
  }
  return std::nullopt;
}

}  // namespace halostep
