// The Hammond table: order of the transition states and parts of the selectivity.
#include <gtest/gtest.h>

#include <cmath>
#include <sstream>
#include <vector>

#include "halostep/quantity.hpp"
#include "tables/hammond.hpp"

namespace halostep {
namespace {

using Row = std::vector<std::string>;

/// Cells of the table rows below a heading, without the head of the table.
std::vector<Row> rows_below(const std::string& text, const std::string& heading) {
  std::istringstream in(text.substr(text.find(heading)));
  std::vector<Row> rows;
  std::string line;
  std::getline(in, line);
  while (std::getline(in, line) && !line.starts_with("## ")) {
    if (!line.starts_with("| ")) continue;
    Row row;
    for (std::size_t from = 2, bar = 0; (bar = line.find(" |", from)) != std::string::npos; from = bar + 3)
      row.push_back(line.substr(from, bar - from));
    rows.push_back(std::move(row));
  }
  if (!rows.empty()) rows.erase(rows.begin());
  return rows;
}

const std::string& table() {
  static const std::string text = hammond_table(Engine::open().value());
  return text;
}

// The position of the transition state rises with the step enthalpy: Hammond, J. Am. Chem. Soc. 1955, 77, 334. Along F,
// Cl, Br, I H-X weakens (570, 432, 366, 298 kJ/mol), so it must rise, and with it the enthalpy part of the selectivity.
TEST(Hammond, EnthalpyPartIsOrderedAsThePositionOfTheTransitionState) {
  const auto rows = rows_below(table(), "## Hydrocarbons");
  EXPECT_GE(rows.size(), 20U);
  for (const auto& r : rows) {
    ASSERT_EQ(r.size(), 8U);
    EXPECT_EQ(r[7], "yes") << r[0];
  }
}

TEST(Hammond, NamesThePartThatTurnsTheOrderOfPolarSubstrates) {
  const auto rows = rows_below(table(), "## Polar substrates");
  std::size_t turned = 0;
  std::vector<std::string> substrates;
  for (const auto& r : rows) {
    ASSERT_EQ(r.size(), 9U);
    if (substrates.empty() || substrates.back() != r[0]) substrates.push_back(r[0]);
    double sum = 0;
    for (std::size_t i = 4; i < 8; ++i) sum += parse_number(r[i]).value();
    EXPECT_NEAR(sum, std::log(parse_number(r[3]).value()), 0.03) << r[0] << " " << r[1];  // printed to two decimals
    const double enthalpy = parse_number(r[4]).value();
    if (std::abs(enthalpy) > 0.01) {
      EXPECT_EQ(r[8] != "-", enthalpy < 0) << r[0] << " " << r[1];
    }
    turned += r[8] != "-";
  }
  EXPECT_GE(substrates.size(), 10U);
  EXPECT_GE(turned, 1U);
}

}  // namespace
}  // namespace halostep
