// fitted.json and the commands of the table compiler.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cstdio>
#include <limits>
#include <set>
#include <string>
#include <tuple>

#include "halostep/structure.hpp"
#include "halostep/tables.hpp"
#include "tables/commands.hpp"
#include "tables/fitted_file.hpp"
#include "tables_support.hpp"

namespace halostep {
namespace {

using testing::ElementsAre;
using testing::HasSubstr;
using testing::IsEmpty;

FittedModel model() {
  return {"bonds", {"base", "an \"odd\" name"},  {0.1, -1e-300},
          {12, 0}, {1.0 / 3, -2e-17, -2e-17, 4}, {{"limit", 1e300}}};
}

TEST(FittedFile, NumbersComeBackAsTheyWere) {
  const FittedFile file{"0123", {model(), {"empty", {}, {}, {}, {}, {}}}};
  const auto back = parse_fitted(fitted_text(file));
  ASSERT_TRUE(back.ok()) << back.error().message;
  EXPECT_EQ(back.value().input_hash, "0123");
  ASSERT_EQ(back.value().models.size(), 2u);
  const auto& m = back.value().models[0];
  EXPECT_EQ(m.parameters, model().parameters);
  EXPECT_EQ(m.values, model().values);
  EXPECT_EQ(m.support, model().support);
  EXPECT_EQ(m.covariance, model().covariance);
  EXPECT_EQ(m.settings, model().settings);
}

TEST(FittedFile, WhatIsWrongIsNamed) {
  const auto why = [](const std::string& text) {
    const auto r = parse_fitted(text);
    return r.ok() ? std::string("accepted") : r.error().message;
  };
  const auto sound = fitted_text({"0123", {model()}});
  const auto spoiled = [&](const std::string& from, const std::string& to) {
    auto text = sound;
    text.replace(text.find(from), from.size(), to);
    return why(text);
  };
  EXPECT_THAT(why("{"), HasSubstr("not readable as JSON"));
  EXPECT_THAT(why("[]"), HasSubstr("input_sha256"));
  EXPECT_THAT(spoiled("\"models\"", "\"model\""), HasSubstr("no list 'models'"));
  EXPECT_THAT(spoiled("\"support\": 12", "\"support\": \"12\""), HasSubstr("model 'bonds': parameter 1"));
  EXPECT_THAT(spoiled("\"covariance\"", "\"c\""), HasSubstr("model 'bonds' has no list 'covariance'"));
  EXPECT_THAT(spoiled("[0.33333333333333331]", "[0.33333333333333331, 1]"), HasSubstr("lower triangle of 2 rows"));
}

TEST(FittedFile, DifferencesAreJudgedRelativeToTheLargestEntry) {
  auto other = model();
  other.values[1] = 0.9e-9;                            // the largest value is 0.1: within 1e-9
  other.covariance[1] = other.covariance[2] = 3.9e-8;  // the largest entry is 4: within 4e-8
  other.settings[0].second = 1e300 * (1 + 0.9e-8);
  EXPECT_THAT(model_differences({model()}, {other}), IsEmpty());
}

TEST(FittedFile, DifferencesNameTheParameter) {
  const auto differences = [](auto change) {
    auto other = model();
    change(other);
    return model_differences({model()}, {other});
  };
  EXPECT_THAT(differences([](auto& m) { m.values[0] *= 1 + 2e-8; }),
              ElementsAre(HasSubstr("model 'bonds': parameter 'base': 0.1 in the file, 0.1000000")));
  EXPECT_THAT(differences([](auto& m) { m.values[0] = std::numeric_limits<double>::quiet_NaN(); }),
              ElementsAre(HasSubstr("parameter 'base'")));
  EXPECT_THAT(differences([](auto& m) { m.covariance[2] = 5e-8; }),
              ElementsAre(HasSubstr("covariance of 'an \"odd\" name' and 'base'")));
  EXPECT_THAT(differences([](auto& m) { m.support[1] = 1; }), ElementsAre(HasSubstr("support: 0 in the file, 1")));
  EXPECT_THAT(differences([](auto& m) { m.settings[0].second = 2; }), ElementsAre(HasSubstr("setting limit")));
  EXPECT_THAT(differences([](auto& m) { m.parameters[0] = "root"; }), ElementsAre(HasSubstr("its parameters")));
  EXPECT_THAT(differences([](auto& m) { m.name = "bond"; }), ElementsAre(HasSubstr("'bonds' in the file, 'bond'")));
  EXPECT_THAT(model_differences({model()}, {}), ElementsAre(HasSubstr("not fitted now")));
  EXPECT_THAT(model_differences({}, {model()}), ElementsAre(HasSubstr("not in the file")));
}

TEST(FittedFile, TheHashFollowsTheRowsAndNotTheModels) {
  test::SmallTable small;
  Faults faults;
  auto t = small.read(faults).table;
  const auto hash = input_hash(t);
  t.models.push_back(model());
  EXPECT_EQ(input_hash(t), hash);
  ASSERT_TRUE(small.edit("bonds_rh.csv", "439,", "439.1,"));
  EXPECT_NE(input_hash(small.read(faults).table), hash);
}

/// What a command says on stderr, and its exit code.
template <class Command>
std::pair<int, std::string> run(Command command) {
  testing::internal::CaptureStderr();
  testing::internal::CaptureStdout();
  const int code = command();
  std::fflush(stdout);
  testing::internal::GetCapturedStdout();
  return {code, testing::internal::GetCapturedStderr()};
}

TEST(Commands, CheckTellsEachFaultOnALineOfItsOwn) {
  test::SmallTable small;
  EXPECT_EQ(run([&] { return check_command(small.dir()); }), (std::pair<int, std::string>{0, ""}));
  ASSERT_TRUE(small.edit("bonds_rh.csv", "439,", "39,"));
  ASSERT_TRUE(small.edit("species.csv", "methane,g", "methane,x"));
  const auto [code, told] = run([&] { return check_command(small.dir()); });
  EXPECT_EQ(code, 1);
  EXPECT_EQ(told, small.dir() + "/bonds_rh.csv:2: d298 39 is out of range: 200 to 620\n" + small.dir() +
                      "/species.csv:2: phase 'x' is unknown; known: g, l, c\n");
}

TEST(Commands, CheckStopsAtFiftyLines) {
  test::SmallTable small;
  for (int i = 0; i < 70; ++i) small.append("left_out.csv", ",,,,");
  const auto [code, told] = run([&] { return check_command(small.dir()); });
  EXPECT_EQ(code, 1);
  EXPECT_EQ(std::count(told.begin(), told.end(), '\n'), 51);
  EXPECT_THAT(told, HasSubstr("and 230 more faults"));
}

TEST(Commands, CompileWantsAFittedFileThatBelongsToTheRows) {
  test::SmallTable small;
  small.add("schema.sql", test::read_file(HALOSTEP_SOURCE_DIR "/bde_tables/schema.sql"));
  const auto out = small.dir() + "/out.sqlite";
  auto [code, told] = run([&] { return compile_command(small.dir(), out); });
  EXPECT_EQ(code, 1);
  EXPECT_THAT(told, HasSubstr("fitted.json:0: no such file"));
  small.add("fitted.json", fitted_text({"0123", {}}));
  std::tie(code, told) = run([&] { return compile_command(small.dir(), out); });
  EXPECT_EQ(code, 1);
  EXPECT_THAT(told, HasSubstr("fitted.json:0: fitted to rows of hash 0123, the rows have "));
  EXPECT_FALSE(std::filesystem::exists(out));
}

/// The curated table of the project, in a place where it may be spoiled.
class CuratedTable : public testing::Test {
 protected:
  void SetUp() override {
    for (const auto& entry : std::filesystem::directory_iterator(HALOSTEP_SOURCE_DIR "/bde_tables")) {
      std::filesystem::copy(entry.path(), dir_ / entry.path().filename().string());
    }
  }
  test::TempDir dir_;
};

TEST_F(CuratedTable, RefitThenCompileThenSpoil) {
  std::filesystem::remove(dir_ / kFittedFile);
  ASSERT_EQ(run([&] { return refit_command(dir_.text()); }), (std::pair<int, std::string>{0, ""}));
  const auto out = dir_ / "out.sqlite";
  ASSERT_EQ(run([&] { return compile_command(dir_.text(), out); }), (std::pair<int, std::string>{0, ""}));
  const auto table = open_table(out);
  ASSERT_TRUE(table.ok()) << table.error().message;
  auto file = read_fitted(dir_ / kFittedFile);
  ASSERT_TRUE(file.ok()) << file.error().message;
  ASSERT_FALSE(file.value().models.empty());
  EXPECT_THAT(model_differences(file.value().models, table.value().models), IsEmpty());

  auto& spoiled = file.value().models.front();
  spoiled.values[0] += 1e-3;
  ASSERT_FALSE(write_fitted(file.value(), dir_ / kFittedFile).has_value());
  const auto [code, told] = run([&] { return compile_command(dir_.text(), out); });
  EXPECT_EQ(code, 1);
  EXPECT_THAT(told, HasSubstr("model '" + spoiled.name + "': parameter '" + spoiled.parameters[0] + "'"));
}

// D(H-X) must agree with the cycle of the formation enthalpies of CODATA Key Values for Thermodynamics (Cox, Wagman,
// Medvedev 1989), kJ/mol, from memory: H 217.998, F 79.38, Cl 121.301, Br 111.87, I 106.76; HF -273.30, HCl -92.31,
// HBr -36.29, HI 26.50.
TEST_F(CuratedTable, HydrogenHalidesAgreeWithTheCodataCycle) {
  Faults faults;
  const auto t = read_tables(dir_.text(), faults).table;
  ASSERT_TRUE(faults.none()) << faults.list().front().reason;
  struct Case {
    const char* molecule;
    double atom, halide;
  };
  for (const auto& [molecule, atom, halide] :
       {Case{"F", 79.38, -273.30}, Case{"Cl", 121.301, -92.31}, Case{"Br", 111.87, -36.29}, Case{"I", 106.76, 26.50}}) {
    const auto it = std::find_if(t.bonds.begin(), t.bonds.end(),
                                 [&](const BondEntry& b) { return b.molecule == molecule && b.leaving == "[H]"; });
    ASSERT_NE(it, t.bonds.end()) << molecule;
    EXPECT_NEAR(it->d298.value, 217.998 + atom - halide, 1.0) << molecule;
  }
}

TEST_F(CuratedTable, EntriesAreCanonicalUniqueAndHaveARow) {
  Faults faults;
  const auto t = read_tables(dir_.text(), faults).table;
  std::set<std::string> seen;
  for (const auto& b : t.bonds) {
    EXPECT_TRUE(seen.insert(b.molecule + " " + b.radical + " " + b.leaving).second) << b.molecule;
    const auto m = parse_smiles(b.molecule, ParseMode::species);
    ASSERT_TRUE(m.ok()) << b.molecule;
    EXPECT_EQ(canonical_smiles(m.value(), false), b.molecule);
    ASSERT_FALSE(b.rows.empty());
    EXPECT_GT(b.d298.u, 0);
  }
}

}  // namespace
}  // namespace halostep
