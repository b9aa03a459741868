// Numbers in and out, units, SHA-256; whatever the locale.
#include "halostep/quantity.hpp"

#include <gtest/gtest.h>

#include <array>
#include <clocale>
#include <cmath>
#include <locale>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace halostep {
namespace {

TEST(ParseNumber, WholeTextOrNothing) {
  const std::pair<std::string_view, double> good[] = {{"0", 0},
                                                      {"-0", 0},
                                                      {"+1.5", 1.5},
                                                      {".5", 0.5},
                                                      {"5.", 5},
                                                      {"439.30", 439.3},
                                                      {"-132.5", -132.5},
                                                      {"1e3", 1000},
                                                      {"1.03E-13", 1.03e-13},
                                                      {"6.02214076e23", 6.02214076e23},
                                                      {"0.1", 0.1},
                                                      {"123456789012345678", 123456789012345678.0}};
  for (const auto& [text, value] : good) {
    const auto r = parse_number(text);
    ASSERT_TRUE(r.ok()) << text;
    EXPECT_EQ(r.value(), value) << text;
  }
  for (const std::string_view bad : {"",
                                     " ",
                                     "+",
                                     "-",
                                     ".",
                                     "e5",
                                     "1,5",
                                     "1.5 ",
                                     " 1.5",
                                     "1.5x",
                                     "0x10",
                                     "1e",
                                     "--1",
                                     "+-1",
                                     "-+1",
                                     "++1",
                                     "inf",
                                     "-inf",
                                     "nan",
                                     "1e400",
                                     "1.2.3",
                                     "\xE2\x88\x92"
                                     "1",
                                     "1\n"}) {
    const auto r = parse_number(bad);
    ASSERT_FALSE(r.ok()) << "'" << bad << "'";
    EXPECT_EQ(r.error().cls, ErrorClass::syntax);
    EXPECT_NE(r.error().message.find(bad), std::string::npos) << "the message shows the text";
  }
  EXPECT_FALSE(parse_number(std::string_view("1\0", 2)).ok());
}

TEST(ParseTemperature, UnitsAndLimits) {
  const std::pair<std::string_view, double> good[] = {{"25C", 298.15},
                                                      {"298.15K", 298.15},
                                                      {"25c", 298.15},
                                                      {"25 C", 298.15},
                                                      {"25 c", 298.15},
                                                      {"400  K ", 400},
                                                      {"298k", 298},
                                                      {"298 k", 298},
                                                      {"25\u00B0C", 298.15},
                                                      {"25 \u00B0C", 298.15},
                                                      {"25 \u00B0 C", 298.15},
                                                      {"25\u00B0c", 298.15},
                                                      {"25\u00A0\u00B0C", 298.15},
                                                      {"25\u2103", 298.15},
                                                      {"25 \u00BA"
                                                       "C",
                                                       298.15},
                                                      {"25\xB0"
                                                       "C",
                                                       298.15},
                                                      {" 25C", 298.15},
                                                      {"-78C", 195.15},
                                                      {"-78 \u00B0C", 195.15},
                                                      {"0C", 273.15},
                                                      {"100K", 100},
                                                      {"2000K", 2000},
                                                      {"1e3K", 1000},
                                                      {"+25C", 298.15}};
  for (const auto& [text, kelvin] : good) {
    const auto r = parse_temperature(text);
    ASSERT_TRUE(r.ok()) << text;
    EXPECT_NEAR(r.value(), kelvin, 1e-9) << text;
  }
  for (const std::string_view bad : {"", "C", "K", "warm", "77F", "25CC", "25KC", "1,5C", "C25", "25\u00B0",
                                     "298\u00B0K", "25\u00B0\u00B0C", "nanK", "infK", "two K"}) {
    const auto r = parse_temperature(bad);
    ASSERT_FALSE(r.ok()) << bad;
    EXPECT_EQ(r.error().cls, ErrorClass::usage);
    EXPECT_NE(r.error().message.find("is not a temperature"), std::string::npos) << r.error().message;
  }
  const std::pair<const char*, std::vector<std::string_view>> refused[] = {
      {"outside 100 to 2000 K", {"99.99K", "2000.01K", "-273.15C", "0K", "1727C", "1e300K", "1e5C"}},
      {"below absolute zero", {"-300C", "-273.16 c", "-1K"}},
      {"has no unit", {"25", "298.15", "0", "-10", " 25 "}}};
  for (const auto& [message, texts] : refused) {
    for (const auto text : texts) {
      const auto r = parse_temperature(text);
      ASSERT_FALSE(r.ok()) << text;
      EXPECT_EQ(r.error().cls, ErrorClass::usage);
      EXPECT_NE(r.error().message.find(message), std::string::npos) << r.error().message;
    }
  }
  EXPECT_NE(parse_temperature("25").error().message.find("25C"), std::string::npos) << "says how to write it";
}

TEST(Format, FixedAndScientific) {
  EXPECT_EQ(format_fixed(439.25, 1), "439.2") << "a tie goes to even (IEEE 754)";
  EXPECT_EQ(format_fixed(-0.04, 1), "0.0") << "no negative zero";
  EXPECT_EQ(format_fixed(-0.0, 0), "0");
  EXPECT_EQ(format_fixed(-0.06, 1), "-0.1");
  EXPECT_EQ(format_fixed(-100, 0), "-100");
  EXPECT_EQ(format_fixed(1234567.891, 2), "1234567.89") << "no thousands separator";
  EXPECT_EQ(format_scientific(1.03e-13, 3), "1.03e-13");
  EXPECT_EQ(format_scientific(9.996e-11, 3), "1.00e-10");
  EXPECT_EQ(format_scientific(2, 1), "2e+00");
}

TEST(Format, ReadsBackToTheLastDigitShown) {
  for (double v = 1e-12; v < 1e12; v *= -7.3) {
    const auto fixed = parse_number(format_fixed(v, 6));
    ASSERT_TRUE(fixed.ok());
    EXPECT_NEAR(fixed.value(), v, 0.5000001e-6 + 1e-15 * std::abs(v));
    const auto scientific = parse_number(format_scientific(v, 6));
    ASSERT_TRUE(scientific.ok());
    EXPECT_NEAR(scientific.value() / v, 1, 0.5000001e-5);
    if (std::abs(v) > 1e11) break;
  }
}

// 1 kcal = 4.184 kJ exactly (thermochemical calorie, ISO 31-4); 105.0 kcal/mol is the textbook figure of CH3-H.
TEST(Units, KilocaloriesAreThermochemical) {
  EXPECT_DOUBLE_EQ(from_kj(439.32, EnergyUnit::kcal), 105.0);
  EXPECT_EQ(from_kj(439.32, EnergyUnit::kj), 439.32);
  EXPECT_STREQ(energy_unit_name(EnergyUnit::kj), "kJ/mol");
  EXPECT_STREQ(energy_unit_name(EnergyUnit::kcal), "kcal/mol");
}

// R = N_A k with k = 1.380649e-23 J/K: both exact since the revision of the SI (CGPM 2018, resolution 1).
TEST(Units, GasConstantIsTheProductOfTheDefiningConstants) {
  EXPECT_NEAR(kGasConstant * 1000 / (kAvogadro * 1.380649e-23), 1, 1e-14);
}

// FIPS 180-4: examples of the standard's own page for SHA-256 (one block, two blocks, four blocks) and a million 'a';
// the empty text from RFC 6234's kind of vectors. Digests from memory, each repeated with another implementation.
TEST(Sha256, Fips180) {
  const std::pair<std::string, const char*> vectors[] = {
      {"", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"},
      {"abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"},
      {"abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
       "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1"},
      {"abcdefghbcdefghicdefghijdefghijkefghijklfghijklmghijklmnhijklmnoijklmnopjklmnopqklmnopqrlmnopqrsmnopqrstnopqrst"
       "u",
       "cf5b16a778af8380036ce59e7b0492370b249b11e8f07a51afac45037afee9d1"},
      {std::string(1000000, 'a'), "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0"}};
  for (const auto& [text, digest] : vectors) EXPECT_EQ(sha256_hex(text), digest) << text.size() << " bytes";
  EXPECT_NE(sha256_hex(std::string("a\0b", 3)), sha256_hex("a")) << "a zero byte does not end the text";
}

// The same text in and out as everywhere else.
void expect_plain_numbers() {
  EXPECT_EQ(parse_number("1.5").value(), 1.5);
  EXPECT_FALSE(parse_number("1,5").ok());
  EXPECT_NEAR(parse_temperature("25.5C").value(), 298.65, 1e-9);
  EXPECT_FALSE(parse_temperature("25,5C").ok());
  EXPECT_EQ(format_fixed(12345.5, 1), "12345.5");
  EXPECT_EQ(format_scientific(1.5e-11, 2), "1.5e-11");
  EXPECT_NE(parse_temperature("1e5K").error().message.find("100000.00 K"), std::string::npos);
  EXPECT_EQ(sha256_hex("abc").size(), 64U);
}

struct CommaPoint : std::numpunct<char> {
  [[nodiscard]] char do_decimal_point() const override { return ','; }
  [[nodiscard]] char do_thousands_sep() const override { return '.'; }
  [[nodiscard]] std::string do_grouping() const override { return "\3"; }
};

// C++ streams and fmt's locale formats follow the global locale: this one writes 12.345,5 on every machine.
TEST(LocaleIndependence, CppLocaleWithAComma) {
  const std::locale before = std::locale::global(std::locale(std::locale::classic(), new CommaPoint));
  expect_plain_numbers();
  std::locale::global(before);
}

// strtod and printf follow the C locale; not every machine has one with a comma.
TEST(LocaleIndependence, CLocaleWithAComma) {
  const std::string before = std::setlocale(LC_ALL, nullptr);
  bool found = false;
  for (const char* name :
       {"de_DE.UTF-8", "de_DE.utf8", "fr_FR.UTF-8", "fr_FR.utf8", "nl_NL.UTF-8", "cs_CZ.UTF-8", "de_DE"}) {
    if (std::setlocale(LC_ALL, name) == nullptr || std::localeconv()->decimal_point[0] != ',') continue;
    found = true;
    expect_plain_numbers();
    break;
  }
  std::setlocale(LC_ALL, before.c_str());
  if (!found) GTEST_SKIP() << "no locale with a decimal comma here; the C++ locale above is tested everywhere";
}

// Ids stand in JSON and in docs/errors.md: lower case, no blanks, none twice.
TEST(ErrorClasses, IdsAreUniqueAndPlain) {
  std::array<std::string, static_cast<std::size_t>(ErrorClass::io) + 1> ids;
  for (std::size_t i = 0; i < ids.size(); ++i) {
    ids[i] = error_class_name(static_cast<ErrorClass>(i));
    EXPECT_FALSE(ids[i].empty());
    EXPECT_EQ(ids[i].find_first_not_of("abcdefghijklmnopqrstuvwxyz-"), std::string::npos) << ids[i];
    for (std::size_t k = 0; k < i; ++k) EXPECT_NE(ids[i], ids[k]);
  }
}

}  // namespace
}  // namespace halostep
