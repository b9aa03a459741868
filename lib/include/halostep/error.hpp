// Errors as values. No public function of halostep throws for bad input.
#pragma once
#include <string>
#include <utility>
#include <variant>

namespace halostep {

/// Stable classes of failure; error_class_name() gives the id used in JSON and docs/errors.md.
enum class ErrorClass {
  usage,           // a wrong option or argument
  empty,           // nothing to read
  too_long,        // input longer than the stated limit
  syntax,          // unclosed ring, branch or bracket; a character out of place
  valence,         // more bonds than the element takes
  aromaticity,     // an aromatic system without a Kekule form
  charge,          // absurd formal charge
  wildcard,        // '*' or a query atom
  reaction,        // reaction text where one molecule is meant
  fragments,       // several disconnected parts where one molecule is meant
  element,         // unknown element symbol
  metal,           // a metal: outside the domain
  ion,             // a net-charged species: outside the domain
  isotope,         // no data exist for this isotope
  radical,         // a radical where a closed-shell substrate is meant
  domain,          // outside the typed domain; the message says what was not covered
  unbalanced,      // a reaction that does not conserve atoms or charge
  no_data,         // a species or quantity without data
  table,           // the table is missing, damaged, or of another layout
  io               // a file that cannot be read or written
};

/// The id of a class, e.g. "too-long"; never empty.
const char* error_class_name(ErrorClass c) noexcept;

/// What happened, in one line: class, message (what and why), place (where; may be empty).
struct Error {
  ErrorClass cls = ErrorClass::usage;
  std::string message;
  std::string place;
};

/// A value or an Error. `value()` on an error is undefined; test with `ok()` first.
template <class T>
class Result {
 public:
  Result(T v) : state_(std::in_place_index<0>, std::move(v)) {}
  Result(Error e) : state_(std::in_place_index<1>, std::move(e)) {}
  [[nodiscard]] bool ok() const noexcept { return state_.index() == 0; }
  explicit operator bool() const noexcept { return ok(); }
  [[nodiscard]] const T& value() const& { return *std::get_if<0>(&state_); }
  [[nodiscard]] T& value() & { return *std::get_if<0>(&state_); }
  [[nodiscard]] T&& value() && { return std::move(*std::get_if<0>(&state_)); }
  [[nodiscard]] const Error& error() const { return *std::get_if<1>(&state_); }

 private:
  std::variant<T, Error> state_;
};

}  // namespace halostep
