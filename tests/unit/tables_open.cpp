// Opening a table: what is found wrong with it is said with its path, what was found and what was wanted.
#include <SQLiteCpp/SQLiteCpp.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cstdlib>
#include <string>

#include "halostep/tables.hpp"
#include "tables/table_io.hpp"
#include "tables_support.hpp"

namespace halostep {
namespace {

using testing::AllOf;
using testing::HasSubstr;

class OpenTable : public testing::Test {
 protected:
  void SetUp() override {
    ::unsetenv(kTableVariable);
    Faults faults;
    table_ = test::SmallTable().read(faults).table;
    ASSERT_TRUE(faults.none());
    table_.models.push_back(
        {"bonds", {"base", "alkyl"}, {439.3, -8.25}, {3, 2}, {0.5, -0.25, -0.25, 1}, {{"scale", 2}}});
    const auto error = write_table(table_, schema(), path_);
    ASSERT_FALSE(error.has_value()) << error->message;
  }
  void TearDown() override { ::unsetenv(kTableVariable); }

  static std::string schema() { return test::read_file(HALOSTEP_SOURCE_DIR "/bde_tables/schema.sql"); }
  void change(const std::string& sql) const { SQLite::Database(path_, SQLite::OPEN_READWRITE).exec(sql); }
  void expect_refused(const char* found, const std::string& wanted) const {
    const auto r = open_table(path_);
    ASSERT_FALSE(r.ok());
    EXPECT_EQ(r.error().cls, ErrorClass::table);
    EXPECT_EQ(r.error().place, path_);
    EXPECT_THAT(r.error().message, AllOf(HasSubstr("'" + path_ + "'"), HasSubstr(std::string("found ") + found),
                                         HasSubstr("wanted " + wanted)));
  }

  test::TempDir dir_;
  std::string path_ = dir_ / "small.sqlite";
  Table table_;
};

TEST_F(OpenTable, WhatWasWrittenIsRead) {
  const auto r = open_table(path_);
  ASSERT_TRUE(r.ok()) << r.error().message;
  const auto& t = r.value();
  EXPECT_EQ(t.origin, path_);
  EXPECT_EQ(t.layout, kTableLayout);
  EXPECT_EQ(t.content_hash, content_hash(table_));
  EXPECT_EQ(canonical_dump(t), canonical_dump(table_));
  EXPECT_EQ(t.bonds.size(), table_.bonds.size());
  EXPECT_EQ(t.models[0].covariance, (std::vector<double>{0.5, -0.25, -0.25, 1}));
  EXPECT_FALSE(t.rates[1].a.has_value()) << "an absent number stays absent";
}

TEST_F(OpenTable, EqualTablesGiveEqualFiles) {
  const auto again = dir_ / "again.sqlite";
  ASSERT_FALSE(write_table(table_, schema(), again).has_value());
  EXPECT_EQ(test::read_file(path_), test::read_file(again));
}

TEST_F(OpenTable, AnotherLayout) {
  change("UPDATE meta SET value = '7' WHERE key = 'layout'");
  expect_refused("layout 7", "layout " + std::to_string(kTableLayout));
}

TEST_F(OpenTable, AChangedRow) {
  change("UPDATE bond_row SET d298 = 500 WHERE id = 0");
  expect_refused("rows of content hash ", (content_hash(table_) + " as recorded").c_str());
}

TEST_F(OpenTable, AChangedModel) {
  change("UPDATE model_parameter SET value = -8.0 WHERE name = 'alkyl'");
  expect_refused("rows of content hash ", content_hash(table_).c_str());
}

TEST_F(OpenTable, AMissingMember) {
  change("DELETE FROM bond_member WHERE row = 1");
  expect_refused("rows of content hash ", content_hash(table_).c_str());
}

TEST_F(OpenTable, NoFile) {
  std::filesystem::remove(path_);
  expect_refused("no such file", "a table made by halostep-tables");
}

TEST_F(OpenTable, ADirectory) {
  std::filesystem::remove(path_);
  std::filesystem::create_directory(path_);
  expect_refused("something that is not a file", "a table made by halostep-tables");
}

TEST_F(OpenTable, AnEmptyFile) {
  test::write_file(path_, "");
  expect_refused("no such table", "a halostep table of layout " + std::to_string(kTableLayout));
}

TEST_F(OpenTable, ATextFile) {
  test::write_file(path_, std::string(5000, 'x'));
  const auto r = open_table(path_);
  ASSERT_FALSE(r.ok());
  EXPECT_EQ(r.error().cls, ErrorClass::table);
  EXPECT_THAT(r.error().message, AllOf(HasSubstr(path_), HasSubstr("found "), HasSubstr("wanted ")));
}

TEST_F(OpenTable, ADatabaseOfSomethingElse) {
  std::filesystem::remove(path_);
  SQLite::Database(path_, SQLite::OPEN_READWRITE | SQLite::OPEN_CREATE).exec("CREATE TABLE x (y)");
  expect_refused("no such table", "a halostep table of layout " + std::to_string(kTableLayout));
}

// Every cut and a damaged byte in each page: never a crash, never a table.
TEST_F(OpenTable, ATruncatedFile) {
  const auto bytes = test::read_file(path_);
  for (std::size_t keep = 4096; keep < bytes.size(); keep += 4096) {
    test::write_file(path_, bytes.substr(0, keep));
    const auto r = open_table(path_);
    ASSERT_FALSE(r.ok()) << keep << " of " << bytes.size() << " bytes";
    EXPECT_EQ(r.error().cls, ErrorClass::table);
  }
}

TEST_F(OpenTable, ADamagedPage) {
  const auto bytes = test::read_file(path_);
  int refused = 0, pages = 0;
  for (std::size_t page = 4096; page + 4096 <= bytes.size(); page += 4096, ++pages) {
    auto damaged = bytes;
    for (std::size_t i = page; i < page + 16; ++i) damaged[i] = static_cast<char>(~damaged[i]);
    test::write_file(path_, damaged);
    const auto r = open_table(path_);
    if (r.ok()) {
      EXPECT_EQ(canonical_dump(r.value()), canonical_dump(table_)) << "page at " << page;
    } else {
      ++refused;
    }
  }
  EXPECT_GT(refused, pages / 2);
}

TEST_F(OpenTable, TheVariableNamesATable) {
  ::setenv(kTableVariable, path_.c_str(), 1);
  const auto r = open_table();
  ASSERT_TRUE(r.ok()) << r.error().message;
  EXPECT_EQ(r.value().origin, path_);
}

TEST_F(OpenTable, APathGoesBeforeTheVariableAndTheMessageSaysSo) {
  ::setenv(kTableVariable, path_.c_str(), 1);
  const auto missing = dir_ / "missing.sqlite";
  const auto r = open_table(missing);
  ASSERT_FALSE(r.ok());
  EXPECT_THAT(r.error().message, AllOf(HasSubstr("'" + missing + "'"), HasSubstr(kTableVariable), HasSubstr(path_)));
}

TEST_F(OpenTable, AWrongVariableIsNotPassedOver) {
  const auto missing = dir_ / "missing.sqlite";
  ::setenv(kTableVariable, missing.c_str(), 1);
  const auto r = open_table();
  ASSERT_FALSE(r.ok());
  EXPECT_THAT(r.error().message, AllOf(HasSubstr("'" + missing + "'"), HasSubstr("the built-in table")));
}

TEST_F(OpenTable, TheBuiltInTableOpens) {
  const auto r = open_table();
  ASSERT_TRUE(r.ok()) << r.error().message;
  EXPECT_EQ(r.value().origin, "built-in");
  EXPECT_GT(r.value().bonds.size(), 300u);
  EXPECT_FALSE(r.value().models.empty());
}

TEST_F(OpenTable, WritingWhereNothingCanBeWrittenIsAnError) {
  const auto error = write_table(table_, schema(), dir_ / "no/such/place.sqlite");
  ASSERT_TRUE(error.has_value());
  EXPECT_THAT(error->message, HasSubstr("no/such/place.sqlite"));
}

TEST_F(OpenTable, TheSchemaRefusesWhatTheCompilerWouldRefuse) {
  EXPECT_ANY_THROW(change("UPDATE bond_row SET u = 0"));
  EXPECT_ANY_THROW(change("DELETE FROM bond_row"));
  auto broken = table_;
  broken.bond_rows[0].superseded = true;
  const auto error = write_table(broken, schema(), dir_ / "broken.sqlite");
  ASSERT_TRUE(error.has_value());
  EXPECT_THAT(error->message, HasSubstr("must give its reason"));
  EXPECT_FALSE(std::filesystem::exists(dir_ / "broken.sqlite")) << "nothing half written is left";
}

}  // namespace
}  // namespace halostep
