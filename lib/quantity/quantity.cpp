#include "halostep/quantity.hpp"

#include <fmt/format.h>
#include <nettle/sha2.h>

#include <array>
#include <charconv>
#include <cmath>

namespace halostep {

const char* error_class_name(ErrorClass c) noexcept {
  switch (c) {
    case ErrorClass::usage: return "usage";
    case ErrorClass::empty: return "empty";
    case ErrorClass::too_long: return "too-long";
    case ErrorClass::syntax: return "syntax";
    case ErrorClass::valence: return "valence";
    case ErrorClass::aromaticity: return "aromaticity";
    case ErrorClass::charge: return "charge";
    case ErrorClass::wildcard: return "wildcard";
    case ErrorClass::reaction: return "reaction";
    case ErrorClass::fragments: return "fragments";
    case ErrorClass::element: return "element";
    case ErrorClass::metal: return "metal";
    case ErrorClass::ion: return "ion";
    case ErrorClass::isotope: return "isotope";
    case ErrorClass::radical: return "radical";
    case ErrorClass::domain: return "domain";
    case ErrorClass::unbalanced: return "unbalanced";
    case ErrorClass::no_data: return "no-data";
    case ErrorClass::table: return "table";
    case ErrorClass::io: return "io";
  }
  return "usage";
}

double from_kj(double kj_mol, EnergyUnit unit) noexcept {
  return unit == EnergyUnit::kj ? kj_mol : kj_mol / kKjPerKcal;
}

const char* energy_unit_name(EnergyUnit unit) noexcept {
  return unit == EnergyUnit::kj ? "kJ/mol" : "kcal/mol";
}

Result<double> parse_number(std::string_view text) {
  std::string_view t = text;
  if (t.size() > 1 && t.front() == '+' && t[1] != '-') t.remove_prefix(1);
  double v = 0.0;
  const auto [end, ec] = std::from_chars(t.data(), t.data() + t.size(), v);
  if (ec != std::errc{} || end != t.data() + t.size() || !std::isfinite(v)) {
    return Error{ErrorClass::syntax, fmt::format("'{}' is not a number", text), {}};
  }
  return v;
}

namespace {

/// Takes a trailing C or K, either case, off the text; the degree sign (UTF-8 or Latin-1) may stand before the C.
char take_temperature_unit(std::string_view& t) {
  const auto drop_end = [&t](std::string_view end) {
    const bool there = t.ends_with(end);
    if (there) t.remove_suffix(end.size());
    return there;
  };
  const auto drop_blanks = [&] {
    while (drop_end(" ") || drop_end("\t") || drop_end("\xC2\xA0")) {}  // the last is a no-break space
  };
  drop_blanks();
  char unit = 0;
  if (drop_end("\xE2\x84\x83")) {  // the one-character form of degree C
    unit = 'C';
  } else if (drop_end("C") || drop_end("c")) {
    unit = 'C';
    drop_blanks();
    // The degree sign or, on some keyboards, the ordinal sign.
    if (!drop_end("\xC2\xB0") && !drop_end("\xC2\xBA")) drop_end("\xB0");
  } else if (drop_end("K") || drop_end("k") || drop_end("\xE2\x84\xAA")) {  // the last is the Kelvin sign
    unit = 'K';
  }
  drop_blanks();
  return unit;
}

}  // namespace

Result<double> parse_temperature(std::string_view text) {
  constexpr double kIcePoint = 273.15, kLowest = 100.0, kHighest = 2000.0;
  std::string_view t = text;
  while (!t.empty() && (t.front() == ' ' || t.front() == '\t')) t.remove_prefix(1);
  const char unit = take_temperature_unit(t);
  const auto number = parse_number(t);
  if (!number.ok()) {
    return Error{ErrorClass::usage, fmt::format("'{}' is not a temperature: write 25C or 298.15K", text), {}};
  }
  if (unit == 0) {
    return Error{ErrorClass::usage, fmt::format("'{}' has no unit: write {}C or {}K", text, t, t), {}};
  }
  const double kelvin = number.value() + (unit == 'C' ? kIcePoint : 0.0);
  if (kelvin < 0.0) {
    return Error{ErrorClass::usage, fmt::format("'{}' is below absolute zero ({} K)", text, format_fixed(kelvin, 2)),
                 {}};
  }
  if (kelvin < kLowest || kelvin > kHighest) {
    return Error{ErrorClass::usage, fmt::format("'{}' is {} K, outside 100 to 2000 K", text, format_fixed(kelvin, 2)),
                 {}};
  }
  return kelvin;
}

std::string format_fixed(double value, int decimals) {
  std::string s = fmt::format("{:.{}f}", value, decimals);
  if (s.front() == '-' && s.find_first_not_of("-0.") == std::string::npos) s.erase(0, 1);
  return s;
}

std::string format_scientific(double value, int digits) {
  return fmt::format("{:.{}e}", value, digits - 1);
}

std::string sha256_hex(std::string_view bytes) {
  sha256_ctx ctx;
  sha256_init(&ctx);
  sha256_update(&ctx, bytes.size(), reinterpret_cast<const std::uint8_t*>(bytes.data()));
  std::array<std::uint8_t, SHA256_DIGEST_SIZE> digest{};
  sha256_digest(&ctx, digest.size(), digest.data());
  std::string out;
  for (const auto byte : digest) out += fmt::format("{:02x}", byte);
  return out;
}

}  // namespace halostep
