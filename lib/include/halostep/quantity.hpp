// Values with standard uncertainty, units and constants.
#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "halostep/error.hpp"

namespace halostep {

/// A value with its standard uncertainty u (JCGM 100:2008, GUM), both in the unit its name states.
struct Quantity {
  double value = 0.0;
  double u = 0.0;
};

/// Molar gas constant, kJ mol-1 K-1 (exact, SI 2019).
inline constexpr double kGasConstant = 8.31446261815324e-3;
/// Avogadro constant, mol-1 (exact, SI 2019).
inline constexpr double kAvogadro = 6.02214076e23;
/// Thermochemical calorie: 1 kcal = 4.184 kJ (exact, ISO 31-4).
inline constexpr double kKjPerKcal = 4.184;
/// Reference temperature of all D and enthalpies of formation, K.
inline constexpr double kReferenceTemperature = 298.15;

enum class EnergyUnit { kj, kcal };

/// kJ/mol to the asked unit.
double from_kj(double kj_mol, EnergyUnit unit) noexcept;
/// "kJ/mol" or "kcal/mol".
const char* energy_unit_name(EnergyUnit unit) noexcept;

/// Reads a decimal number; '.' is the point whatever the locale; the whole text must be the number.
/// Errors: syntax (not a number, trailing text, not finite).
Result<double> parse_number(std::string_view text);

/// Reads "25C", "25 c", "25 °C", "298.15K": a number and its unit, C or K in either case, with or without a degree
/// sign and blanks. Result in K. Errors: usage (no number, no unit or an unknown one, below 0 K, not within 100 K to
/// 2000 K).
Result<double> parse_temperature(std::string_view text);

/// Fixed notation with `decimals` digits; "-0.0" is written "0.0". Independent of the locale.
std::string format_fixed(double value, int decimals);
/// Scientific notation with `digits` significant digits, e.g. "1.03e-13".
std::string format_scientific(double value, int digits);
/// SHA-256 of the bytes, 64 lower-case hexadecimal digits (FIPS 180-4; nettle).
std::string sha256_hex(std::string_view bytes);

}  // namespace halostep
