// The figures of `validate`: coverage, the list of rows that judge, targets.
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>
#include <string>
#include <vector>

#include "tables/judged_list.hpp"
#include "tables/reliability.hpp"
#include "tables/scores.hpp"
#include "tables/summary.hpp"

namespace halostep {
namespace {

// Normal law, common tables: |z| = 0.6745 bounds half of it, 1.645 nine tenths.
TEST(Reliability, ReadsNominalCoverageOffTheNormalLaw) {
  const auto c = reliability("x", {0.67, -0.68, 1.64, -1.66});
  EXPECT_EQ(c.rows, 4U);
  EXPECT_EQ(c.observed[0], 0);    // 10 %
  EXPECT_EQ(c.observed[4], 25);   // 50 %: the first alone
  EXPECT_EQ(c.observed[8], 75);   // 90 %: all but the last
  EXPECT_EQ(c.observed[9], 100);  // 95 %
}

TEST(Reliability, PlotDrawsEachCurveWithItsMarksAndUnits) {
  const auto c = reliability("first", {0.1, 2.0});
  const auto svg = reliability_svg({c, reliability("second", {1.0})});
  std::size_t marks = 0;
  for (auto at = svg.find("translate("); at != std::string::npos; at = svg.find("translate(", at + 1)) ++marks;
  EXPECT_EQ(marks, 2 * (kNominal.size() + 1));  // and one each in the legend
  for (const char* text : {"first", "second", "nominal coverage of the interval, %", "values inside, %", "</svg>"})
    EXPECT_NE(svg.find(text), std::string::npos) << text;
}

TEST(JudgedList, CountsByGroupAndTellsEqualKeysApart) {
  Section s;
  s.id = "rates";
  s.list("Cl + a", "one, twice");
  s.list("Cl + a", "one, twice", Judged::refused, "outside");
  s.list("Cl + b", "two", Judged::excluded, "a \"doubt\"");
  s.list("Br + a", "three", Judged::not_asked, "a limit");
  const auto n = count_judged(s, [](const std::string& g) { return g.starts_with("Cl"); });
  EXPECT_EQ(n.judged, 1);
  EXPECT_EQ(n.not_asked, 0);
  EXPECT_DOUBLE_EQ(n.excluded_share(), 1.0 / 3);
  EXPECT_DOUBLE_EQ(n.left_out_share(), 2.0 / 3);
  EXPECT_EQ(judged_csv({&s}),
            "section,key,class,excluded,reason\n"
            "rates,\"one, twice #2\",Cl + a,refused,outside\n"
            "rates,\"one, twice\",Cl + a,no,\n"
            "rates,three,Br + a,not asked,a limit\n"
            "rates,two,Cl + b,yes,\"a \"\"doubt\"\"\"\n");
}

nlohmann::json with_mean_error(double e) {
  nlohmann::json c = {{"class", "all C-H"}, {"rows", 120}, {"mean_abs", e}};
  return {{"sections", {{{"id", "bonds"}, {"classes", nlohmann::json::array({c})}}}}, {"judged", nlohmann::json::array()}};
}

TEST(Summary, SaysMetNotMetAndNoFigure) {
  const auto find = [](const nlohmann::json& summary, const std::string& target) {
    for (const auto& e : summary) {
      if (e["target"] == target) return e;
    }
    return nlohmann::json();
  };
  const auto good = summary_json(with_mean_error(6.4)), bad = summary_json(with_mean_error(6.6));
  EXPECT_EQ(find(good, "D(C-H), mean error")["met"], true);
  EXPECT_EQ(find(bad, "D(C-H), mean error")["met"], false);
  EXPECT_TRUE(find(good, "D(R-X), mean error")["met"].is_null());
  EXPECT_NE(summary_markdown(bad).find("| 6.6 | not met |"), std::string::npos);
}

}  // namespace
}  // namespace halostep
