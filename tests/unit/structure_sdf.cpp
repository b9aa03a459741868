// Reading of MOL and SDF. Layout: BIOVIA, CTfile Formats (V2000, V3000); names and CIP senses are textbook knowledge.
#include <fmt/format.h>

#include <atomic>
#include <sstream>
#include <thread>

#include "structure_read.hpp"

namespace halostep {
namespace {

struct A {
  std::string symbol;
  double x = 0, y = 0;
};
struct B {
  int a, b, type = 1, stereo = 0;
};

std::string v2000(const std::string& title, const std::vector<A>& atoms, const std::vector<B>& bonds,
                  const std::string& properties = "") {
  std::string out =
      fmt::format("{}\n  test\n\n{:3}{:3}  0  0  0  0  0  0  0  0999 V2000\n", title, atoms.size(), bonds.size());
  for (const auto& a : atoms) {
    out += fmt::format("{:10.4f}{:10.4f}{:10.4f} {:<3} 0  0  0  0  0  0  0  0  0  0  0  0\n", a.x, a.y, 0.0, a.symbol);
  }
  for (const auto& b : bonds) out += fmt::format("{:3}{:3}{:3}{:3}\n", b.a, b.b, b.type, b.stereo);
  return out + properties + "M  END\n";
}

// The lines of a V3000 table, each without its "M  V30 ".
std::string v3000(const std::string& title, std::initializer_list<std::string_view> lines) {
  std::string out = title + "\n  test\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\n";
  for (const auto line : lines) out += fmt::format("M  V30 {}\n", line);
  return out + "M  V30 END CTAB\nM  END\n";
}

std::string methane() { return v2000("methane", {{"C"}}, {}); }
const std::string kEnd = "$$$$\n";

std::vector<SdfRecord> read_all(const std::string& text, ParseMode mode = ParseMode::substrate) {
  std::istringstream in(text);
  SdfReader reader(in, mode);
  std::vector<SdfRecord> out;
  while (auto r = reader.next()) out.push_back(std::move(*r));
  EXPECT_FALSE(reader.next().has_value());
  return out;
}

std::string replaced(std::string text, std::string_view from, std::string_view to) {
  for (std::size_t at = 0; (at = text.find(from, at)) != std::string::npos; at += to.size())
    text.replace(at, from.size(), to);
  return text;
}

std::string smiles_of(const std::string& record, ParseMode mode = ParseMode::substrate) {
  const auto all = read_all(record, mode);
  if (all.size() != 1) return fmt::format("{} records", all.size());
  const auto& m = all[0].molecule;
  return m.ok() ? canonical_smiles(m.value())
                : fmt::format("{}: {}", error_class_name(m.error().cls), m.error().message);
}

// The record is refused as its class at its place, and the good one after it is still read.
void expect_refused(const std::string& record, ErrorClass cls, const std::string& place) {
  const auto all = read_all(methane() + kEnd + record + kEnd + methane() + kEnd);
  ASSERT_EQ(all.size(), 3U) << record;
  EXPECT_TRUE(all[0].molecule.ok());
  ASSERT_FALSE(all[1].molecule.ok()) << record;
  EXPECT_STREQ(error_class_name(all[1].molecule.error().cls), error_class_name(cls)) << all[1].molecule.error().message;
  EXPECT_EQ(all[1].molecule.error().place, place) << all[1].molecule.error().message;
  EXPECT_FALSE(all[1].molecule.error().message.empty());
  EXPECT_EQ(all[2].number, 3);
  ASSERT_TRUE(all[2].molecule.ok());
  EXPECT_EQ(formula(all[2].molecule.value()), "CH4");
}

TEST(Sdf, RecordsInOrderWithNumberAndTitle) {
  const auto ethanol = v2000("  ethanol, 96 %  ", {{"C"}, {"C", 1}, {"O", 2}}, {{1, 2}, {2, 3}});
  const auto all = read_all(methane() + "> <id>\n7\n\n" + kEnd + ethanol + kEnd + v2000("", {{"O"}}, {}) + kEnd);
  ASSERT_EQ(all.size(), 3U);
  for (int i = 0; i < 3; ++i) EXPECT_EQ(all[static_cast<std::size_t>(i)].number, i + 1);
  EXPECT_EQ(all[0].title, "methane");
  EXPECT_EQ(all[1].title, "ethanol, 96 %");
  EXPECT_EQ(all[2].title, "");
  ASSERT_TRUE(all[1].molecule.ok());
  EXPECT_EQ(canonical_smiles(all[1].molecule.value()), same_as("CCO"));
  EXPECT_EQ(formula(all[2].molecule.value()), "H2O");
}

TEST(Sdf, CrlfReadsTheSame) {
  const std::string text = methane() + kEnd + "broken\n\n\n xx\n" + kEnd + v2000("x", {{"C"}, {"Cl", 1}}, {{1, 2}});
  const auto lf = read_all(text), crlf = read_all(replaced(text, "\n", "\r\n"));
  ASSERT_EQ(lf.size(), 3U);
  ASSERT_EQ(crlf.size(), 3U);
  for (std::size_t i = 0; i < 3; ++i) {
    EXPECT_EQ(lf[i].title, crlf[i].title);
    ASSERT_EQ(lf[i].molecule.ok(), crlf[i].molecule.ok());
    if (lf[i].molecule.ok()) {
      EXPECT_EQ(canonical_smiles(lf[i].molecule.value()), canonical_smiles(crlf[i].molecule.value()));
    } else {
      EXPECT_EQ(lf[i].molecule.error().place, crlf[i].molecule.error().place);
    }
  }
}

// Old Macintosh files end their lines with CR alone.
TEST(Sdf, CrAloneReadsTheSame) {
  const std::string text = methane() + kEnd + "broken\n\n\n xx\n" + kEnd + v2000("x", {{"C"}, {"Cl", 1}}, {{1, 2}});
  std::string with_cr = text;
  std::replace(with_cr.begin(), with_cr.end(), '\n', '\r');
  const auto all = read_all(with_cr);
  ASSERT_EQ(all.size(), 3U);
  EXPECT_EQ(all[0].title, "methane");
  ASSERT_TRUE(all[0].molecule.ok());
  EXPECT_EQ(formula(all[0].molecule.value()), "CH4");
  ASSERT_FALSE(all[1].molecule.ok());
  EXPECT_EQ(all[1].molecule.error().place, "record 2, line 4");
  ASSERT_TRUE(all[2].molecule.ok());
  EXPECT_EQ(canonical_smiles(all[2].molecule.value()), same_as("CCl"));
}

TEST(Sdf, VersionsThatAreNotReadAreRefused) {
  const auto good = v2000("x", {{"C"}, {"C", 1}}, {{1, 2}});
  for (const char* version : {"V9000", "V4000", "V300", "v2000", "V20000"}) {
    expect_refused(replaced(good, "V2000", version), ErrorClass::syntax, "record 2, line 4");
    const auto all = read_all(replaced(good, "V2000", version));
    ASSERT_EQ(all.size(), 1U);
    EXPECT_NE(all[0].molecule.error().message.find(version), std::string::npos) << all[0].molecule.error().message;
  }
  EXPECT_EQ(smiles_of(replaced(good, " V2000", "")), same_as("CC"));  // from before there were versions
}

TEST(Sdf, IonsArePlacedAtTheirAtom) {
  expect_refused(v2000("x", {{"C"}, {"N", 1}}, {{1, 2}}, "M  CHG  1   2   1\n"), ErrorClass::ion, "record 2, line 6");
}

TEST(Sdf, EndOfStream) {
  EXPECT_EQ(read_all("").size(), 0U);
  EXPECT_EQ(read_all("\n \n").size(), 0U);
  EXPECT_EQ(read_all(methane()).size(), 1U);                  // a lone MOL file
  EXPECT_EQ(read_all(methane() + kEnd + "\n\n").size(), 1U);  // blank lines after the last record
  EXPECT_EQ(read_all(methane() + "$$$$").size(), 1U);         // no line end at the end
  EXPECT_EQ(smiles_of(methane().substr(0, methane().size() - 1)), same_as("C"));
}

TEST(Sdf, BrokenV2000) {
  const std::vector<A> two = {{"C"}, {"C", 1}};
  const auto good = v2000("x", two, {{1, 2}});
  expect_refused("x\n\n", ErrorClass::syntax, "record 2, line 2");
  expect_refused(replaced(good, "  2  1  0", " xx  1  0"), ErrorClass::syntax, "record 2, line 4");
  expect_refused(replaced(good, "  2  1  0", "        0"), ErrorClass::syntax, "record 2, line 4");
  expect_refused(replaced(good, "  2  1  0", "  3  1  0"), ErrorClass::syntax,
                 "record 2, line 7");  // atom block too short
  expect_refused(replaced(good, "  2  1  0", "  2  2  0"), ErrorClass::syntax,
                 "record 2, line 8");  // bond block too short
  expect_refused(replaced(good, "  2  1  0", "999999  0"), ErrorClass::syntax, "record 2, line 7");
  expect_refused(replaced(good, "    1.0000", "    1.0x00"), ErrorClass::syntax, "record 2, line 6");
  expect_refused(replaced(good, "    1.0000", "   +-1.000"), ErrorClass::syntax, "record 2, line 6");
  expect_refused(replaced(good, "M  END\n", ""), ErrorClass::syntax, "record 2, line 7");
  expect_refused(v2000("x", two, {{1, 3}}), ErrorClass::syntax, "record 2, line 7");
  expect_refused(v2000("x", two, {{0, 1}}), ErrorClass::syntax, "record 2, line 7");
  expect_refused(v2000("x", two, {{1, 1}}), ErrorClass::syntax, "record 2, line 7");
  expect_refused(v2000("x", two, {{1, 2, 0}}), ErrorClass::syntax, "record 2, line 7");
  expect_refused(v2000("x", two, {{1, 2}, {2, 1}}), ErrorClass::syntax, "record 2, line 8");
  expect_refused(v2000("x", two, {{1, 2}}, "M  CHG  1   3   1\n"), ErrorClass::syntax, "record 2, line 8");
  expect_refused(v2000("x", two, {{1, 2}}, "M  CHG  2   1   1\n"), ErrorClass::syntax, "record 2, line 8");
  expect_refused(v2000("x", {}, {}), ErrorClass::empty, "record 2, line 4");
  expect_refused("", ErrorClass::empty, "record 2");
  expect_refused("\n\n\n", ErrorClass::empty, "record 2");
  expect_refused("$RXN\n\n\n  1  1\n", ErrorClass::reaction, "record 2, line 1");
}

TEST(Sdf, BrokenV3000) {
  const auto with = [](std::string_view atom, std::string_view bond, std::string_view counts = "COUNTS 2 1 0 0 0") {
    return v3000("x", {counts, "BEGIN ATOM", "1 C 0 0 0 0", atom, "END ATOM", "BEGIN BOND", bond, "END BOND"});
  };
  EXPECT_EQ(smiles_of(with("2 C 1 0 0 0", "1 1 1 2")), same_as("CC"));
  expect_refused(with("2 C 1 0 0 0", "1 1 1 3"), ErrorClass::syntax, "record 2, line 12");
  expect_refused(with("2 C 1 0 0 0", "1 1 1"), ErrorClass::syntax, "record 2, line 12");
  expect_refused(with("2 C 1 0 0 0", "1 8 1 2"), ErrorClass::wildcard, "record 2, line 12");
  expect_refused(with("2 C 1 0 0 0", "1 9 1 2"), ErrorClass::domain, "record 2, line 12");
  expect_refused(with("2 C 1 0", "1 1 1 2"), ErrorClass::syntax, "record 2, line 9");
  expect_refused(with("1 C 1 0 0 0", "1 1 1 2"), ErrorClass::syntax, "record 2, line 9");
  expect_refused(with("2 [C,N] 1 0 0 0", "1 1 1 2"), ErrorClass::wildcard, "record 2, line 9");
  expect_refused(with("2 NOT [C,N] 1 0 0 0", "1 1 1 2"), ErrorClass::wildcard, "record 2, line 9");
  expect_refused(with("2 R# 1 0 0 0 RGROUPS=(1 1)", "1 1 1 2"), ErrorClass::wildcard, "record 2, line 9");
  expect_refused(with("2 Xx 1 0 0 0", "1 1 1 2"), ErrorClass::element, "record 2, line 9");
  expect_refused(with("2 C 1 0 0 0 CHG=9", "1 1 1 2"), ErrorClass::charge, "record 2, line 9");
  expect_refused(with("2 C 1 0 0 0 CHG=x", "1 1 1 2"), ErrorClass::syntax, "record 2, line 9");
  expect_refused(with("2 C 1 0 0 0", "1 1 1 2", "COUNTS 3 1 0 0 0"), ErrorClass::syntax, "record 2, line 15");
  expect_refused(with("2 C 1 0 0 0", "1 1 1 2", "COUNTS 2 2 0 0 0"), ErrorClass::syntax, "record 2, line 15");
  expect_refused(with("2 C 1 0 0 0", "1 1 1 2", "COUNTS two 1 0 0 0"), ErrorClass::syntax, "record 2, line 6");
  expect_refused(replaced(with("2 C 1 0 0 0", "1 1 1 2"), "M  END\n", ""), ErrorClass::syntax, "record 2, line 14");
}

TEST(Sdf, WhatIsNoDefiniteStructure) {
  for (const char* query : {"A", "Q", "*", "R#", "X", "M", "L", "R1"}) {
    expect_refused(v2000("x", {{"C"}, {query, 1}}, {{1, 2}}), ErrorClass::wildcard, "record 2, line 6");
  }
  for (const int type : {5, 6, 7, 8}) {
    expect_refused(v2000("x", {{"C"}, {"C", 1}}, {{1, 2, type}}), ErrorClass::wildcard, "record 2, line 7");
  }
  expect_refused(v2000("x", {{"C"}}, {}, "M  ALS   1  2 F C   N\n"), ErrorClass::wildcard, "record 2, line 6");
  for (const char* unknown : {"Xx", "CL", "c", "12"}) {
    expect_refused(v2000("x", {{"C"}, {unknown, 1}}, {{1, 2}}), ErrorClass::element, "record 2, line 6");
  }
}

TEST(Sdf, SameChecksAsForSmiles) {
  const std::vector<A> star = {{"C"}, {"C"}, {"C"}, {"C"}, {"C"}, {"C"}};
  expect_refused(v2000("x", star, {{2, 1}, {2, 3}, {2, 4}, {2, 5}, {2, 6}}), ErrorClass::valence, "record 2, line 6");
  expect_refused(
      v2000("x", {{"C"}, {"C"}, {"C"}, {"C"}, {"C"}}, {{1, 2, 4}, {2, 3, 4}, {3, 4, 4}, {4, 5, 4}, {5, 1, 4}}),
      ErrorClass::aromaticity, "record 2");
  expect_refused(v2000("x", {{"C"}, {"O"}}, {}), ErrorClass::fragments, "record 2");
  expect_refused(v2000("x", {{"C"}, {"Hg"}, {"C"}}, {{1, 2}, {2, 3}}), ErrorClass::metal, "record 2, line 6");
  expect_refused(v2000("x", {{"N"}}, {}, "M  CHG  1   1   1\n"), ErrorClass::ion, "record 2, line 5");
  expect_refused(v2000("x", {{"C"}}, {}, "M  CHG  1   1   9\n"), ErrorClass::charge, "record 2, line 6");
}

TEST(Sdf, RadicalsAreNoSubstratesButSpecies) {
  const auto ethyl = v2000("ethyl", {{"C"}, {"C", 1}}, {{1, 2}}, "M  RAD  1   2   2\n");
  expect_refused(ethyl, ErrorClass::radical, "record 2, line 6");
  EXPECT_EQ(smiles_of(ethyl, ParseMode::species), same_as("C[CH2]"));
  EXPECT_EQ(smiles_of(v2000("O", {{"O"}}, {}, "M  RAD  1   1   3\n"), ParseMode::species), same_as("[O]"));
  EXPECT_EQ(
      smiles_of(v3000("Cl", {"COUNTS 1 0 0 0 0", "BEGIN ATOM", "1 Cl 0 0 0 0 RAD=2", "END ATOM"}), ParseMode::species),
      same_as("[Cl]"));
  // VAL=-1: no bonds and no hydrogens.
  EXPECT_EQ(
      smiles_of(v3000("O", {"COUNTS 1 0 0 0 0", "BEGIN ATOM", "1 O 0 0 0 0 VAL=-1", "END ATOM"}), ParseMode::species),
      same_as("[O]"));
}

TEST(Sdf, ChargesIsotopesHydrogens) {
  const std::vector<A> nitro = {{"C"}, {"N", 1}, {"O", 2, 1}, {"O", 2, -1}};
  EXPECT_EQ(smiles_of(v2000("x", nitro, {{1, 2}, {2, 3, 2}, {2, 4}}, "M  CHG  2   2   1   4  -1\n")),
            same_as("C[N+](=O)[O-]"));
  EXPECT_EQ(smiles_of(v2000("x", nitro, {{1, 2}, {2, 3, 2}, {2, 4, 2}})), same_as("C[N+](=O)[O-]"));
  EXPECT_EQ(smiles_of(v2000("x", {{"C"}, {"D", 1}}, {{1, 2}})), same_as("[2H]C"));
  EXPECT_EQ(smiles_of(v2000("x", {{"C"}, {"C", 1}}, {{1, 2}}, "M  ISO  1   2  13\n")), same_as("C[13CH3]"));
  const std::vector<A> all_atoms = {{"H", 1}, {"C"}, {"H", -1}, {"H", 0, 1}, {"H", 0, -1}};
  EXPECT_EQ(smiles_of(v2000("x", all_atoms, {{1, 2}, {2, 3}, {2, 4}, {2, 5}})), same_as("C"));
}

TEST(Sdf, AromaticEitherWay) {
  const std::vector<A> ring = {{"C"}, {"C"}, {"C"}, {"C"}, {"C"}, {"C"}, {"C"}};
  for (const auto& [first, second] : {std::pair{1, 2}, {2, 1}, {4, 4}}) {
    EXPECT_EQ(
        smiles_of(v2000(
            "toluene", ring,
            {{1, 2, first}, {2, 3, second}, {3, 4, first}, {4, 5, second}, {5, 6, first}, {6, 1, second}, {6, 7}})),
        same_as("Cc1ccccc1"));
  }
}

TEST(Sdf, V3000NumbersAndContinuation) {
  EXPECT_EQ(smiles_of(v3000("x", {"COUNTS 3 2 0 0 0", "BEGIN ATOM", "30 C 0 0 0 0", "10 O -", "2 0 0 0", "20 C 1 0 0 0",
                                  "END ATOM", "BEGIN BOND", "7 1 30 20", "9 2 20 10", "END BOND"})),
            same_as("CC=O"));
}

// Drawn flat with N up-left, CO2H right, CH3 down-left: a hashed bond to N leaves the implicit H in front, so that
// N, CO2H, CH3 run counterclockwise seen from behind it: S, which is L-alanine (Cahn, Ingold & Prelog, Angew. Chem.
// Int. Ed. 1966, 5, 385).
TEST(Sdf, WedgeBonds) {
  const std::vector<A> alanine = {{"C", -0.5, -0.87}, {"C"}, {"N", -0.5, 0.87}, {"C", 1, 0}, {"O", 1.5, 0.87},
                                  {"O", 1.5, -0.87}};
  const auto drawn = [&](int stereo) {
    return v2000("alanine", alanine, {{1, 2}, {2, 3, 1, stereo}, {2, 4}, {4, 5, 2}, {4, 6}});
  };
  EXPECT_EQ(smiles_of(drawn(6)), same_as("C[C@H](N)C(=O)O"));
  EXPECT_EQ(smiles_of(drawn(1)), same_as("C[C@@H](N)C(=O)O"));
  EXPECT_EQ(smiles_of(drawn(0)), same_as("CC(N)C(=O)O"));
  EXPECT_EQ(smiles_of(drawn(4)), same_as("CC(N)C(=O)O"));
  const auto v3 = [](std::string_view bond) {
    return v3000("alanine", {"COUNTS 6 5 0 0 0", "BEGIN ATOM", "1 C -0.5 -0.87 0 0", "2 C 0 0 0 0", "3 N -0.5 0.87 0 0",
                             "4 C 1 0 0 0", "5 O 1.5 0.87 0 0", "6 O 1.5 -0.87 0 0", "END ATOM", "BEGIN BOND",
                             "1 1 1 2", bond, "3 1 2 4", "4 2 4 5", "5 1 4 6", "END BOND"});
  };
  EXPECT_EQ(smiles_of(v3("2 1 2 3 CFG=3")), same_as("C[C@H](N)C(=O)O"));
  EXPECT_EQ(smiles_of(v3("2 1 2 3 CFG=1")), same_as("C[C@@H](N)C(=O)O"));
  EXPECT_EQ(smiles_of(v3("2 1 2 3")), same_as("CC(N)C(=O)O"));
}

TEST(Sdf, DoubleBondsFromCoordinates) {
  const auto butene = [](double y, int stereo) {
    return v2000("butene", {{"C", -0.5, 0.87}, {"C"}, {"C", 1}, {"C", 1.5, y}}, {{1, 2}, {2, 3, 2, stereo}, {3, 4}});
  };
  EXPECT_EQ(smiles_of(butene(0.87, 0)), same_as("C/C=C\\C"));
  EXPECT_EQ(smiles_of(butene(-0.87, 0)), same_as("C/C=C/C"));
  EXPECT_EQ(smiles_of(butene(-0.87, 3)), same_as("CC=CC"));  // 3: either
  EXPECT_EQ(smiles_of(v2000("no coordinates", {{"C"}, {"C"}, {"C"}, {"C"}}, {{1, 2}, {2, 3, 2}, {3, 4}})),
            same_as("CC=CC"));
  EXPECT_EQ(smiles_of(v3000("either", {"COUNTS 4 3 0 0 0", "BEGIN ATOM", "1 C -0.5 0.87 0 0", "2 C 0 0 0 0",
                                       "3 C 1 0 0 0", "4 C 1.5 -0.87 0 0", "END ATOM", "BEGIN BOND", "1 1 1 2",
                                       "2 2 2 3 CFG=2", "3 1 3 4", "END BOND"})),
            same_as("CC=CC"));
  // In a six-membered ring there is nothing to tell apart.
  const std::vector<A> ring = {{"C", 1, 0},        {"C", 0.5, 0.87},  {"C", -0.5, 0.87}, {"C", -1, 0},
                               {"C", -0.5, -0.87}, {"C", 0.5, -0.87}, {"C", 2, 0}};
  EXPECT_EQ(smiles_of(v2000("1-methylcyclohexene", ring, {{1, 2, 2}, {2, 3}, {3, 4}, {4, 5}, {5, 6}, {6, 1}, {1, 7}})),
            same_as("CC1=CCCCC1"));
}

TEST(Sdf, TooLongRecordsAreSkipped) {
  const std::string line = std::string(79, 'x') + '\n';
  std::string data = "> <notes>\n";
  while (data.size() <= kMaxRecordText) data += line;
  expect_refused(methane() + data, ErrorClass::too_long, "record 2");
  expect_refused(methane() + "> <one line>\n" + std::string(3 * kMaxRecordText, 'x') + "\n", ErrorClass::too_long,
                 "record 2");
  const std::string fits = methane() + "> <notes>\n";
  EXPECT_EQ(smiles_of(fits + std::string(kMaxRecordText - fits.size() - 1, 'x') + "\n"), same_as("C"));
}

// Any cut through a good file gives records and errors, never a crash or a wrong molecule.
TEST(Sdf, EveryTruncation) {
  const std::string text = v2000("nitromethane", {{"C"}, {"N", 1}, {"O", 2, 1}, {"O", 2, -1}},
                                 {{1, 2}, {2, 3, 2}, {2, 4}}, "M  CHG  2   2   1   4  -1\n");
  for (std::size_t n = 1; n < text.find("M  END") + 6; ++n) {
    for (const auto& r : read_all(text.substr(0, n))) EXPECT_FALSE(r.molecule.ok()) << n;
  }
}

// Beyond three columns: only V3000 has room for them.
TEST(Sdf, MoreThan999Atoms) {
  const auto chain = [](std::string_view first, std::string_view properties, int ring_type) {
    constexpr int kLength = 1200;
    std::string out =
        "long\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nM  V30 COUNTS 1206 1206 0 0 0\n";
    out += fmt::format("M  V30 BEGIN ATOM\nM  V30 1 {} 0 0 0 0 {}\n", first, properties);
    for (int i = 2; i <= kLength + 6; ++i) out += fmt::format("M  V30 {} C {} 0 0 0\n", i, i);
    out += "M  V30 END ATOM\nM  V30 BEGIN BOND\n";
    for (int i = 1; i <= kLength; ++i) out += fmt::format("M  V30 {} 1 {} {}\n", i, i, i + 1);
    for (int k = 0; k < 6; ++k) {
      const int type = ring_type == 4 ? 4 : 1 + k % 2;
      out += fmt::format("M  V30 {} {} {} {}\n", kLength + 1 + k, type, kLength + 1 + k, kLength + 1 + (k + 1) % 6);
    }
    return out + "M  V30 END BOND\nM  V30 END CTAB\nM  END\n";
  };
  const std::string tail = std::string(1199, 'C') + "c1ccccc1";
  EXPECT_EQ(smiles_of(chain("C", "", 1)), same_as("C" + tail));
  EXPECT_EQ(smiles_of(chain("C", "RAD=2", 1), ParseMode::species), same_as("[CH2]" + tail));
  EXPECT_EQ(smiles_of(chain("C", "MASS=13", 1)), same_as("[13CH3]" + tail));
  EXPECT_EQ(smiles_of(chain("O", "VAL=2", 1)), same_as("O" + tail));
  expect_refused(chain("N", "CHG=1", 1), ErrorClass::ion, "record 2, line 8");
  expect_refused(chain("C", "", 4), ErrorClass::aromaticity, "record 2");
}

// Charge codes and mass differences of the atom lines (old files); "M  CHG" and "M  ISO" win over them.
TEST(Sdf, CodesOnAtomLines) {
  const auto coded = [](std::string_view symbol, std::string_view codes, std::string_view properties = "") {
    return fmt::format(
        "x\n\n\n  2  1  0  0  0  0            999 V2000\n    0.0000    0.0000    0.0000 C   0  0\n"
        "    1.0000    0.0000    0.0000 {:<3}{}\n  1  2  1  0\n{}M  END\n",
        symbol, codes, properties);
  };
  EXPECT_EQ(smiles_of(coded("C", " 0  4"), ParseMode::species), same_as("C[CH2]"));
  EXPECT_EQ(smiles_of(coded("C", " 1  0")), same_as("C[13CH3]"));
  EXPECT_EQ(smiles_of(coded("H", " 1  0")), same_as("[2H]C"));
  EXPECT_EQ(smiles_of(coded("C", " 1  0", "M  ISO  1   2  14\n")), same_as("C[14CH3]"));
  EXPECT_EQ(smiles_of(coded("C", " 0  3", "M  CHG  1   2   0\n")), same_as("CC"));
  expect_refused(coded("O", " 0  5"), ErrorClass::ion, "record 2, line 6");
  expect_refused(coded("O", " x  0"), ErrorClass::syntax, "record 2, line 6");
}

// Open Babel crashes when two threads parse at once; ours are locked.
TEST(Sdf, FromSeveralThreads) {
  std::string text;
  for (int i = 0; i < 100; ++i) text += v2000("ethanol", {{"C"}, {"C", 1}, {"O", 2}}, {{1, 2}, {2, 3}}) + kEnd;
  const auto expected = same_as("CCO");
  std::atomic<int> right = 0;
  {
    std::vector<std::jthread> threads;
    for (int k = 0; k < 4; ++k) {
      threads.emplace_back([&] {
        std::istringstream in(text);
        SdfReader reader(in);
        while (auto r = reader.next()) {
          const auto m = parse_smiles("OCC");
          right += r->molecule.ok() && canonical_smiles(r->molecule.value()) == expected && m.ok() &&
                   canonical_smiles(m.value()) == expected;
        }
      });
    }
  }
  EXPECT_EQ(right, 400);
}

}  // namespace
}  // namespace halostep
