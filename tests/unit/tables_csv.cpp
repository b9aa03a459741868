// The strict reader of the curated files. Rules: RFC 4180 (Y. Shafranovich, 2005), sections 2.1-2.7, narrowed to LF.
#include <gtest/gtest.h>

#include <string>
#include <vector>

#include "tables/csv_reader.hpp"

namespace halostep {
namespace {

using Fields = std::vector<std::string>;

TEST(Csv, FieldsAndLines) {
  const auto r = read_csv("a,b\n1,\n,2\n");
  ASSERT_TRUE(r.ok());
  ASSERT_EQ(r.value().size(), 3u);
  EXPECT_EQ(r.value()[0].fields, (Fields{"a", "b"}));
  EXPECT_EQ(r.value()[1].fields, (Fields{"1", ""}));
  EXPECT_EQ(r.value()[2].fields, (Fields{"", "2"}));
  EXPECT_EQ(r.value()[2].line, 3);
}

TEST(Csv, EmptyTextHasNoRecords) {
  const auto r = read_csv("");
  ASSERT_TRUE(r.ok());
  EXPECT_TRUE(r.value().empty());
}

TEST(Csv, QuotesCommasAndLineFeedsInsideQuotes) {
  const auto r = read_csv("\"a,b\",\"say \"\"so\"\"\",\"\"\n\"two\nlines\",x,y\nz,z,z\n");
  ASSERT_TRUE(r.ok());
  ASSERT_EQ(r.value().size(), 3u);
  EXPECT_EQ(r.value()[0].fields, (Fields{"a,b", "say \"so\"", ""}));
  EXPECT_EQ(r.value()[1].fields[0], "two\nlines");
  EXPECT_EQ(r.value()[1].line, 2);
  EXPECT_EQ(r.value()[2].line, 4) << "a record is named by the line it starts on";
}

TEST(Csv, BlanksBelongToTheField) {
  const auto r = read_csv(" a , b\n");
  ASSERT_TRUE(r.ok());
  EXPECT_EQ(r.value()[0].fields, (Fields{" a ", " b"}));
}

TEST(Csv, Utf8IsKept) {
  const auto r = read_csv("\xC2\xB1,\xE2\x80\xA2,\xF0\x9D\x9B\xA5\n");
  ASSERT_TRUE(r.ok());
  EXPECT_EQ(r.value()[0].fields[1], "\xE2\x80\xA2");
}

struct Bad {
  const char* name;
  const char* text;
  const char* place;
  const char* message;
};

class CsvRefuse : public testing::TestWithParam<Bad> {};

TEST_P(CsvRefuse, ToldWithLine) {
  const auto r = read_csv(GetParam().text);
  ASSERT_FALSE(r.ok());
  EXPECT_EQ(r.error().cls, ErrorClass::syntax);
  EXPECT_EQ(r.error().place, GetParam().place);
  EXPECT_NE(r.error().message.find(GetParam().message), std::string::npos) << r.error().message;
}

const auto kName = [](const auto& test) { return std::string(test.param.name); };
INSTANTIATE_TEST_SUITE_P(Csv, CsvRefuse,
                         testing::Values(Bad{"BlankLine", "a,b\n\n1,2\n", "line 2", "blank line"},
                                         Bad{"CarriageReturn", "a,b\r\n", "line 1", "carriage return"},
                                         Bad{"ByteOrderMark",
                                             "\xEF\xBB\xBF"
                                             "a,b\n",
                                             "line 1", "byte order mark"},
                                         Bad{"NotUtf8", "a,b\n\xE9,2\n", "line 2", "not UTF-8"},
                                         Bad{"CutUtf8", "a,\xE2\x80", "line 1", "not UTF-8"},
                                         Bad{"QuoteInside", "a,b\n1,x\"y\n", "line 2", "quote inside"},
                                         Bad{"TextBehindQuote", "a,b\n\"1\"x,2\n", "line 2", "after a closing quote"},
                                         Bad{"OpenQuote", "a,b\n1,\"2\n", "line 3", "not closed"},
                                         Bad{"NoLineFeed", "a,b\n1,2", "line 2", "line feed"}),
                         kName);

}  // namespace
}  // namespace halostep
