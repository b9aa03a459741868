// The report module on answers made by hand: layout, CSV, JSON, comparison.
#include <gmock/gmock.h>

#include <cmath>
#include <limits>
#include <nlohmann/json.hpp>

#include "halostep/report.hpp"
#include "report/grid.hpp"
#include "report/phrases.hpp"

namespace halostep {
namespace {

using nlohmann::json;
using testing::HasSubstr;
using testing::Not;

Table small_table() {
  Table t;
  t.layout = 1;
  t.content_hash = std::string(64, '0');
  t.origin = "built-in";
  t.sources = {{"blanksby2003", "S. J. Blanksby, G. B. Ellison, Acc. Chem. Res. 36, 255 (2003)", "10.1021/ar020230d",
                "evaluation", 2003, "read"},
               {"old1970", "A book", "", "textbook", 1970, ""}};
  t.bond_rows = {{"C", "[CH3]", "[H]", 439.3, 0.2, "1s", "evaluated", "memory", "", "", false, 0},
                 {"C", "[CH3]", "[H]", 435.0, 4.0, "none", "measured", "memory", "", "older \"scale\", low", true, 1}};
  t.bonds = {{"C", "[CH3]", "[H]", {439.3, 0.3}, {439.3, 0.3}, -1, -1, -1, {0, 1}}};
  return t;
}

BondsRecord methane() {
  BondAnswer b;
  b.bond = "C-H";
  b.atoms = {0};
  b.h_count = 4;
  b.bond_count = 4;
  b.radical = "[CH3]";
  b.type = "methane";
  b.d298 = Quantity{439.3, 0.3};
  b.route = Route::measured;
  b.sources = {0, 1};
  return {{"C", "", "C", "CH4", {}}, {b}};
}

HalogenOutcome outcome_of(Halogen x, double dh, double share, double k) {
  HalogenOutcome o;
  o.halogen = x;
  SiteOutcome s;
  s.atoms = {0};
  s.h_count = 1;
  s.radical = "C[C](C)C";
  s.dh = {dh, 1};
  s.share = s.share_low = s.share_high = share;
  s.k_cm3_s = k;
  SiteOutcome rest = s;
  rest.atoms = {1};
  rest.atom = 1;
  rest.radical = "CC(C)[CH2]";
  rest.share = rest.share_low = rest.share_high = 1 - share;
  o.sites = {s, rest};
  return o;
}

StepAnswer net_of(Halogen x, double dh) {
  StepAnswer s;
  s.halogen = x;
  s.kind = StepKind::net;
  s.dh = Quantity{dh, 1};
  return s;
}

TEST(Grid, AlignsAndDropsEmptyColumns) {
  const Grid grid{{{"name", false}, {"gone", false}, {"n", true}}, {{"a", "", "1"}, {"long", "", "10"}}, {}};
  EXPECT_EQ(aligned(grid), "name   n\na      1\nlong  10\n");
}

TEST(Grid, WidthCountsCharactersNotBytes) {
  EXPECT_EQ(display_width("25 \xC2\xB0"
                          "C"),
            5u);
}

TEST(Grid, CsvQuotesByRfc4180) {
  const Grid grid{{{"a", false}, {"b", false}}, {{"x,y", "say \"no\""}, {"two\nlines", ""}}, {}};
  EXPECT_EQ(csv(grid), "a,b\r\n\"x,y\",\"say \"\"no\"\"\"\r\n\"two\nlines\",\r\n");
}

TEST(Phrases, ShareNeverReadsAsCertain) {
  EXPECT_EQ(percent(0.64), "64.0");
  EXPECT_EQ(percent(0.9996), "99.96");
  EXPECT_EQ(percent(1 - 1e-9), ">99.999");
  EXPECT_EQ(percent(1e-9), "<0.001");
  EXPECT_EQ(percent(1.0), "100.0");
}

// JCGM 100:2008 (GUM), 7.2.6: the value is rounded to match its uncertainty.
TEST(Phrases, UncertaintyNeverReadsAsZero) {
  const auto text = [](double value, double u) {
    const auto q = quantity_text({value, u}, 1);
    return q.value + " u " + q.u;
  };
  EXPECT_EQ(text(439.34, 0.4), "439.3 u 0.4");
  EXPECT_EQ(text(439.34, 12.34), "439.3 u 12.3");
  EXPECT_EQ(text(435.998, 0.013), "436.00 u 0.01");
  EXPECT_EQ(text(217.998, 0.0002), "217.9980 u 0.0002");
  EXPECT_EQ(text(436.0, 0.05), "436.0 u 0.1");
  EXPECT_EQ(text(436.0, 0.049), "436.00 u 0.05");
  EXPECT_EQ(text(0, 0), "0.0 u 0.0");
  EXPECT_EQ(energy_text(Quantity{436.0, 0.1}, EnergyUnit::kcal).u, "0.02");
  EXPECT_EQ(energy_text(std::nullopt, EnergyUnit::kj).value, "-");
  EXPECT_EQ(csv_energy(0.0002, EnergyUnit::kj), "0.00020");
  EXPECT_EQ(csv_energy(439.3, EnergyUnit::kj), "439.300");
}

TEST(BondsReport, SmallUncertaintyIsShown) {
  BondsRecord exact = methane();
  exact.bonds[0].d298 = Quantity{435.998, 0.013};
  EXPECT_THAT(bonds_text(small_table(), std::vector{exact}, {}), HasSubstr("436.00"));
  Table t = small_table();
  t.bond_rows[0].u = 0.004;
  EXPECT_THAT(table_text(t, {TableView::show, RowKind::bonds, {0}}, EnergyUnit::kj),
              HasSubstr("439.300     0.004  1s"));
}

TEST(Phrases, UnreadableInputIsShownShort) {
  const std::string text =
      head_text({std::string(70000, 'C'), "", "", "", Error{ErrorClass::too_long, "70000 bytes", ""}});
  EXPECT_LT(text.size(), 300u);
  EXPECT_THAT(text, HasSubstr("CCC...\n"));
}

TEST(Phrases, ErrorIsOneLine) {
  EXPECT_EQ(error_line({ErrorClass::syntax, "bad\ntext\x1b", "line 2"}), "syntax: bad text  (line 2)");
}

TEST(BondsReport, TextNamesUnitAndCitesInFull) {
  const std::vector<BondsRecord> records{methane()};
  const std::string kj = bonds_text(small_table(), records, {});
  EXPECT_THAT(kj, HasSubstr("D298 kJ/mol"));
  EXPECT_THAT(kj, HasSubstr("439.3"));
  EXPECT_THAT(kj, HasSubstr("blanksby2003: S. J. Blanksby"));
  const std::string kcal = bonds_text(small_table(), records, {EnergyUnit::kcal, false});
  EXPECT_THAT(kcal, HasSubstr("D298 kcal/mol"));
  EXPECT_THAT(kcal, HasSubstr("105.0"));  // 439.3 / 4.184
  EXPECT_THAT(kcal, Not(HasSubstr("439.3")));
}

TEST(BondsReport, NullHasAReasonAndErrorsKeepTheirRecord) {
  BondsRecord thin = methane();
  thin.bonds[0].d298.reset();
  thin.bonds[0].why = Error{ErrorClass::domain, "not covered", "atom 0"};
  BondsRecord bad{{"C((", "", "", "", Error{ErrorClass::syntax, "unclosed branch", "position 1"}}, {}};
  const auto j = json::parse(bonds_json(small_table(), std::vector{thin, bad}));
  EXPECT_EQ(j["schema"], "halostep.bonds/1");
  const auto& bond = j["molecules"][0]["bonds"][0];
  EXPECT_TRUE(bond["d298_kj_mol"].is_null());
  EXPECT_THAT(bond["why"]["d298_kj_mol"].get<std::string>(), HasSubstr("not covered"));
  EXPECT_EQ(j["molecules"][1]["error"]["class"], "syntax");
  EXPECT_TRUE(j["molecules"][1]["smiles"].is_null());
}

TEST(BondsReport, NotANumberBecomesNull) {
  BondsRecord broken = methane();
  broken.bonds[0].d298 = Quantity{std::numeric_limits<double>::quiet_NaN(), 1};
  const std::string text = bonds_json(small_table(), std::vector{broken});
  EXPECT_THAT(text, Not(HasSubstr("nan")));
  EXPECT_TRUE(json::parse(text)["molecules"][0]["bonds"][0]["d298_kj_mol"].is_null());
}

TEST(BondsReport, BytesThatAreNotUtf8KeepJsonValid) {
  BondsRecord odd = methane();
  odd.head.name = "caf\xE9";
  EXPECT_TRUE(json::accept(bonds_json(small_table(), std::vector{odd})));
}

TEST(StepsReport, UnbalancedReactionSaysSo) {
  const std::vector<ReactionRecord> reactions{{"C>>CC", {}, Error{ErrorClass::unbalanced, "1 C left, 2 right", ""}}};
  const auto j = json::parse(steps_json(small_table(), {}, reactions));
  EXPECT_EQ(j["schema"], "halostep.reactions/1");
  EXPECT_EQ(j["reactions"][0]["balanced"], false);
  EXPECT_TRUE(j["reactions"][0]["dh_kj_mol"].is_null());
}

TEST(Compare, BromineBeatsChlorineOnShareAndFluorineOnHeat) {
  const std::vector outcomes{outcome_of(Halogen::F, -160, 0.999, 1e-10), outcome_of(Halogen::Cl, -30, 0.36, 1e-11),
                             outcome_of(Halogen::Br, 37, 0.99, 1e-16), outcome_of(Halogen::I, 105, 0.999, 1e-24)};
  const std::vector steps{net_of(Halogen::F, -450), net_of(Halogen::Cl, -130), net_of(Halogen::Br, -60),
                          net_of(Halogen::I, 20)};
  const auto c = compare_site(outcomes, steps, 0, "site");
  ASSERT_TRUE(c.ok());
  EXPECT_EQ(c.value().rows[static_cast<std::size_t>(c.value().best)].halogen, Halogen::Br);
  EXPECT_TRUE(c.value().rows[0].hazardous);
  EXPECT_FALSE(c.value().rows[3].propagates);
  EXPECT_THAT(c.value().why, HasSubstr("99.0 %"));
}

TEST(Compare, WordsOnlyWhatWasComputed) {
  auto two = outcome_of(Halogen::Br, 37, 0.99, 1e-30);
  const auto slow = compare_site(std::vector{two}, std::vector{net_of(Halogen::Br, -60)}, 0, "site").value();
  EXPECT_THAT(slow.rows[0].verdict, HasSubstr("enthalpy allows a chain"));
  EXPECT_THAT(slow.rows[0].verdict, HasSubstr("selective"));
  // 1 / (1e-30 cm3/s * 6.022e20 cm-3) = 1.7e9 s
  EXPECT_THAT(slow.rows[0].verdict, HasSubstr("slow: at 1 mol/L an atom needs 1.7e+09 s"));
  EXPECT_THAT(slow.why, HasSubstr("; but slow"));
  auto single = outcome_of(Halogen::Cl, -30, 1, 1e-11);
  single.sites.pop_back();
  const auto one = compare_site(std::vector{single}, std::vector{net_of(Halogen::Cl, -130)}, 0, "site").value();
  EXPECT_EQ(one.rows[0].verdict, "enthalpy allows a chain; only C-H site");
  EXPECT_THAT(one.why, HasSubstr("the only C-H site"));
  EXPECT_THAT(one.why, Not(HasSubstr("100")));
  const auto unknown = compare_site(std::vector{two}, {}, 0, "site").value();
  EXPECT_THAT(unknown.rows[0].verdict, HasSubstr("net not known"));
  two.sites[0].share_low = 0.7;
  const auto wide = compare_site(std::vector{two}, {}, 0, "site").value();
  EXPECT_THAT(wide.rows[0].verdict, Not(HasSubstr("selective"))) << "the range reaches down to 70 %";
}

TEST(Compare, EqualSharesGoToTheFaster) {
  const std::vector outcomes{outcome_of(Halogen::Cl, -30, 0.990, 1e-12), outcome_of(Halogen::Br, 30, 0.992, 1e-15)};
  const auto c = compare_site(outcomes, {}, 0, "site");
  ASSERT_TRUE(c.ok());
  EXPECT_EQ(c.value().best, 0);
}

TEST(Compare, NothingPropagates) {
  const std::vector outcomes{outcome_of(Halogen::I, 130, 1, 1e-25)};
  const auto c = compare_site(outcomes, {}, 0, "site");
  ASSERT_TRUE(c.ok());
  EXPECT_EQ(c.value().best, -1);
  EXPECT_THAT(c.value().why, HasSubstr("none"));
}

TEST(Compare, UnknownSiteIsAnError) {
  const auto c = compare_site(std::vector{outcome_of(Halogen::Cl, -30, 1, 1e-11)}, {}, 7, "site");
  ASSERT_FALSE(c.ok());
  EXPECT_EQ(c.error().cls, ErrorClass::domain);
}

TEST(TableReport, ShowListsSupersededRowsToo) {
  const std::string text = table_text(small_table(), {TableView::show, RowKind::bonds, {0}}, EnergyUnit::kj);
  EXPECT_THAT(text, HasSubstr("superseded"));
  EXPECT_THAT(text, HasSubstr("older \"scale\", low"));
  const auto j = json::parse(table_json(small_table(), {TableView::show, RowKind::bonds, {0}}));
  EXPECT_EQ(j["bonds"][0]["rows"].size(), 2u);
  EXPECT_TRUE(j["rows"].is_null());
  EXPECT_TRUE(j["why"].contains("rows"));
}

}  // namespace
}  // namespace halostep
