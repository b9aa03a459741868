// What the table compiler refuses: each fault is seeded into a sound table and must be told, it alone, with file, line
// and reason.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <ostream>
#include <string>

#include "tables_support.hpp"

namespace halostep {
namespace {

using test::SmallTable;

struct Seeded {
  const char* name;
  const char* file;  // where the fault is seeded
  const char* from;  // replaced text; empty: `to` is appended as a line
  const char* to;
  int line;               // where it must be told
  const char* reason;     // part of what must be told
  const char* told = "";  // file it must be told for, when another one
};

void PrintTo(const Seeded& s, std::ostream* out) { *out << s.name; }

class Refuse : public testing::TestWithParam<Seeded> {};

TEST_P(Refuse, ToldWithFileLineAndReason) {
  const auto& s = GetParam();
  SmallTable table;
  if (*s.from == '\0') {
    table.append(s.file, s.to);
  } else {
    ASSERT_TRUE(table.edit(s.file, s.from, s.to)) << "the text to spoil is not there";
  }
  Faults faults;
  table.read(faults);
  ASSERT_EQ(faults.list().size(), 1u) << (faults.none() ? "" : faults.list().back().reason);
  const auto& fault = faults.list().front();
  EXPECT_EQ(fault.file, *s.told == '\0' ? s.file : s.told);
  EXPECT_EQ(fault.line, s.line);
  EXPECT_THAT(fault.reason, testing::HasSubstr(s.reason));
}

constexpr Seeded kForm[] = {
    {"UnknownColumn", "left_out.csv", "key,value", "key,worth,value", 1, "unknown column 'worth'"},
    {"MissingColumn", "left_out.csv", "file,key,value,source,reason\nbonds_rh.csv,C,430,",
     "file,key,source,reason\nb,C,", 1, "missing column 'value'"},
    {"DoubledColumn", "left_out.csv", "value,source", "value,value,source", 1, "doubled column 'value'"},
    {"FieldTooFew", "left_out.csv", "C,430,", "C,", 2, "4 fields where the header has 5"},
    {"FieldTooMany", "left_out.csv", "C,430,", "C,430,,", 2, "6 fields where the header has 5"},
    {"BlankLine", "left_out.csv", "reason\n", "reason\n\n", 2, "a blank line"},
    {"NoLastLineFeed", "left_out.csv", "too old\n", "too old", 2, "does not end in a line feed"},
    {"ListOrder", "file_list.txt", "sources.csv\n", "mixtures.csv\n", 1, "'sources.csv' belongs"},
    {"ListShort", "file_list.txt", "left_out.csv\n", "", 8, "'left_out.csv' and what follows"},
    {"ListLong", "file_list.txt", "", "more.csv", 10, "one file too many"},
};

constexpr Seeded kWords[] = {
    {"Method", "bonds_rh.csv", "measured", "guessed", 2, "method 'guessed' is unknown"},
    {"Provenance", "bonds_rh.csv", "memory", "hearsay", 3, "provenance 'hearsay' is unknown"},
    {"Coverage", "bonds_rh.csv", "1s", "3s", 2, "coverage '3s' is unknown"},
    {"Status", "bonds_rx.csv", "current", "doubtful", 2, "status 'doubtful' is unknown"},
    {"Unit", "bonds_rh.csv", "kcal/mol", "eV", 5, "unit 'eV' is unknown"},
    {"Phase", "species.csv", "methane,g", "methane,s", 2, "phase 's' is unknown"},
    {"Carrier", "rates_abstraction.csv", "Cl,CC,", "At,CC,", 3, "carrier 'At' is unknown"},
    {"Use", "mixtures.csv", "fit", "maybe", 2, "use 'maybe' is unknown"},
    {"Type", "rates_other.csv", "halogen-transfer", "transfer", 2, "type 'transfer' is unknown"},
    {"RateUnit", "rates_other.csv", "cm3", "L/mol", 2, "unit 'L/mol' is unknown"},
    {"DoiPrefix", "sources.csv", "10.1000/a", "11.1000/a", 2, "doi '11.1000/a' is not of the form"},
    {"DoiDigits", "sources.csv", "10.1000/a", "10.100/a", 2, "is not of the form"},
    {"DoiBlank", "sources.csv", "10.1000/a", "10.1000/a b", 2, "is not of the form"},
    {"DoiLink", "sources.csv", "10.1000/a", "doi:10.1000/a", 2, "is not of the form"},
    {"DoiBasis", "sources.csv", "/a,read", "/a,hearsay", 2, "doi_basis 'hearsay' is unknown"},
    {"DoiWithoutBasis", "sources.csv", "/a,read", "/a,", 2, "doi_basis"},
    {"BasisWithoutDoi", "sources.csv", "Second,,,,", "Second,,,rule,", 3, "doi_basis without a doi"},
    {"Kind", "sources.csv", "measurement", "rumour", 2, "kind 'rumour' is unknown"},
};

constexpr Seeded kNumbers[] = {
    {"NoNumber", "bonds_rh.csv", "439", "439x", 2, "d298 '439x' is not a number"},
    {"DecimalComma", "bonds_rh.csv", "439", "\"439,1\"", 2, "d298 '439,1' is not a number"},
    {"Infinite", "bonds_rh.csv", "439", "inf", 2, "d298 'inf' is not a number"},
    {"BondTooWeak", "bonds_rh.csv", "439", "199.9", 2, "d298 199.9 is out of range: 200 to 620"},
    {"BondTooStrong", "bonds_rh.csv", "370", "620.1", 4, "d298 620.1 is out of range"},
    {"KilocaloriesAsKilojoules", "bonds_rh.csv", "103.15,kcal/mol", "431.6,kcal/mol", 5, "d298 431.6 is out of range"},
    {"OtherBondTooWeak", "bonds_rx.csv", "160", "49", 3, "d298 49 is out of range: 50 to 700"},
    {"OtherBondTooStrong", "bonds_rx.csv", "350", "701", 2, "d298 701 is out of range"},
    {"NoBondEnergy", "bonds_rx.csv", "350", "", 2, "d298 is empty"},
    {"ZeroU", "bonds_rh.csv", "370,kJ/mol,2", "370,kJ/mol,0", 4, "u 0 is out of range: above 0 up to 40"},
    {"WideU", "bonds_rh.csv", "370,kJ/mol,2", "370,kJ/mol,41", 4, "u 41 is out of range"},
    {"Enthalpy", "species.csv", "-74.6", "-3001", 2, "dfh298 -3001 is out of range: -3000 to 1500"},
    {"EnthalpyWithoutU", "species.csv", "0.1,95%", ",95%", 2, "dfh298 and u must both be given"},
    {"NothingGiven", "species.csv", "186.2", "", 3, "none of dfh298, s298 and cp298"},
    {"HydrogenCount", "rates_abstraction.csv", "[CH3],4", "[CH3],5", 2, "h_count 5 is more than the H of C"},
    {"HalfHydrogen", "rates_abstraction.csv", "[CH3],4", "[CH3],3.5", 2, "h_count 3.5 is not a whole number"},
    {"PrefactorAlone", "rates_abstraction.csv", "1e-11,0,10", "1e-11,0,", 2, "a and ea must both be given"},
    {"NoRate", "rates_abstraction.csv", "5.9e-11", "", 3, "neither a with ea nor k298"},
    {"Disagreement", "rates_abstraction.csv", "1.767e-13", "1.98e-13", 2, "more than 10 % apart"},
    {"TemperatureRange", "rates_abstraction.csv", "200,300", "300,200", 2, "t_min is above t_max"},
    {"OtherDisagreement", "rates_other.csv", "cm3,,,", "cm3,,,3e-12", 2, "more than 10 % apart"},
    {"OtherPrefactorAlone", "rates_other.csv", "5e-12,0,2", "5e-12,0,", 2, "a without ea"},
    {"Fraction", "mixtures.csv", "0.45", "1.2", 2, "fraction 1.2 is out of range: 0 to 1"},
    {"FractionSum", "mixtures.csv", "0.45", "0.51", 2, "sum to 1.060"},
    {"Ratio", "relative_rates.csv", "3.9", "0", 2, "ratio_per_h 0 is out of range"},
    {"Temperature", "relative_rates.csv", ",300,gas", ",27,gas", 2, "t 27 is out of range: 100 to 2000"},
    {"Year", "sources.csv", "2001,10", "201,10", 2, "year 201 is out of range"},
};

constexpr Seeded kChemistry[] = {
    {"Unparsable", "bonds_rh.csv", "CC=C,", "CC(=C,", 4, "molecule 'CC(=C' does not parse"},
    {"Valence", "species.csv", "C,methane", "C(C)(C)(C)(C)C,methane", 2, "does not parse"},
    {"NameBehind", "species.csv", "C,methane", "C methane,methane", 2, "a blank in the structure"},
    {"Radical", "bonds_rh.csv", "[CH2]C=C", "[CH2]CC", 4, "less one H"},
    {"RadicalOfAnotherSite", "bonds_rh.csv", "[CH2]C=C", "C1C[CH]1", 4, "less one H"},
    {"MoleculeAsRadical", "bonds_rh.csv", "[CH2]C=C", "CC=C", 4, "less one H"},
    {"RadicalWithThreeFreeValences", "bonds_rh.csv", "[CH2]C=C", "[CH2][CH][CH2]", 4, "the unpaired electrons differ"},
    {"RateRadical", "rates_abstraction.csv", "[CH3],4", "C[CH2],4", 2, "less one H"},
    {"RelativeRadical", "relative_rates.csv", "C[CH]C", "C[CH]CC", 2, "less one H"},
    {"ReferenceRadical", "relative_rates.csv", "CC[CH2]", "CCC[CH2]", 2, "less one H"},
    {"PartsTooMany", "bonds_rx.csv", "CCl,[CH3],[Cl]", "CCl,C[CH2],[Cl]", 2,
     "the parts do not add up to the molecule: 3 H on the left, 5 on the right; 1 C on the left, 2 on the right"},
    {"WrongHalogen", "bonds_rx.csv", "CCl,[CH3],[Cl]", "CCl,[CH3],[Br]", 2, "do not add up"},
    {"PartsOfNoBond", "bonds_rx.csv", "COOC,C[O],C[O]", "COOC,[CH3],[CH2]OO", 3, "no acyclic single bond"},
    {"RingBond", "bonds_rx.csv", "COOC,C[O],C[O]", "C1CO1,[CH2],C=O", 3, "no acyclic single bond"},
    {"PartWithThreeFreeValences", "bonds_rx.csv", "CCl,[CH3],[Cl]", "C=CCCl,[CH2][CH][CH2],[Cl]", 2,
     "no acyclic single bond"},
    {"Reaction", "rates_other.csv", ">>CCl", ">>CCCl", 2, "does not balance: 3 H on the left, 5 on the right"},
    {"ReactionText", "rates_other.csv", ">>CCl", ">CCl", 2, "does not parse"},
    {"NotAMonohalide", "mixtures.csv", "CCCCl", "CCC", 2, "one H replaced by a halogen"},
};

constexpr Seeded kEvidence[] = {
    {"SourceMissing", "bonds_rx.csv", "4,none,derived,read,alpha2001", "4,none,derived,read,gamma", 3,
     "source 'gamma' is not in sources.csv"},
    {"SourceEmpty", "bonds_rh.csv", "measured,read,alpha2001", "measured,read,", 2, "source is empty"},
    {"SourceUnused", "sources.csv", "", "gamma,Third,,,,practice", 4, "source 'gamma' is used by no row"},
    {"SourceTwice", "sources.csv", "", "beta,Third,,,,practice", 4, "source 'beta' is already in line 3"},
    {"SourceName", "sources.csv", "", "Beta,Third,,,,practice", 4, "id 'Beta' is not lower-case"},
    {"Duplicate", "bonds_rh.csv", "", "C,[CH3],439,kJ/mol,3,none,measured,read,alpha2001,current,,again", 6,
     "the same as line 2"},
    {"DuplicateInOtherSpelling", "bonds_rh.csv", "",
     "C=CC,C=C[CH2],370,kJ/mol,3,none,measured,read,beta,current,,again", 6, "the same as line 4"},
    {"DuplicateRate", "rates_abstraction.csv", "",
     "Cl,CC,total,6,,,,,,5.9e-11,0.1,none,measured,read,alpha2001,current,,show,again", 4, "the same as line 3"},
    {"Outlier", "bonds_rh.csv", "", "C,[CH3],444,kJ/mol,1,1s,derived,read,beta,current,,", 6,
     "3.7 combined u from the bond's other rows (439.5) and has no note"},
    {"SupersededWithoutReason", "bonds_rh.csv", "beta,current", "beta,superseded", 3, "superseded without a reason"},
    {"ReasonInCurrentRow", "bonds_rh.csv", "beta,current,", "beta,current,too old", 3, "in a current row"},
    {"ShownWithoutNote", "rates_abstraction.csv", "show,why", "show,", 3, "no note says why"},
};

const auto kName = [](const auto& test) { return std::string(test.param.name); };
INSTANTIATE_TEST_SUITE_P(Form, Refuse, testing::ValuesIn(kForm), kName);
INSTANTIATE_TEST_SUITE_P(Words, Refuse, testing::ValuesIn(kWords), kName);
INSTANTIATE_TEST_SUITE_P(Numbers, Refuse, testing::ValuesIn(kNumbers), kName);
INSTANTIATE_TEST_SUITE_P(Chemistry, Refuse, testing::ValuesIn(kChemistry), kName);
INSTANTIATE_TEST_SUITE_P(Evidence, Refuse, testing::ValuesIn(kEvidence), kName);

TEST(RefuseAll, ASoundTableHasNoFaults) {
  SmallTable table;
  Faults faults;
  const auto curated = table.read(faults);
  EXPECT_TRUE(faults.none()) << faults.list().front().reason;
  ASSERT_EQ(curated.rows_per_file.size(), 9u);
  EXPECT_EQ(curated.rows_per_file[1].second, 4u);
}

TEST(RefuseAll, AnOutlierWithANoteIsAccepted) {
  SmallTable table;
  table.append("bonds_rh.csv", "C,[CH3],444,kJ/mol,1,1s,derived,read,beta,current,,another method");
  // It widens the scatter of the others, so that the two older rows need no note.
  Faults faults;
  table.read(faults);
  EXPECT_TRUE(faults.none()) << faults.list().front().reason;
}

TEST(RefuseAll, AllFaultsAreToldInTheOrderOfFilesAndLines) {
  SmallTable table;
  table.edit("mixtures.csv", "0.45", "x");
  table.edit("bonds_rh.csv", "439", "x");
  table.edit("bonds_rh.csv", "[Cl],103.15", "[Br],103.15");
  table.append("sources.csv", "gamma,Third,,,,practice");
  Faults faults;
  table.read(faults);
  std::vector<std::string> told;
  for (const auto& f : faults.list()) told.push_back(f.file + ":" + std::to_string(f.line));
  EXPECT_THAT(told, testing::ElementsAre("sources.csv:4", "bonds_rh.csv:2", "bonds_rh.csv:5", "mixtures.csv:2"));
}

TEST(RefuseAll, AMissingFileIsOneFault) {
  SmallTable table;
  ASSERT_TRUE(std::filesystem::remove(table.dir() + "/bonds_rx.csv"));
  Faults faults;
  table.read(faults);
  ASSERT_EQ(faults.list().size(), 1u);
  EXPECT_EQ(faults.list()[0].file, "bonds_rx.csv");
}

TEST(RefuseAll, AFileThatNobodyReadsIsAFault) {
  SmallTable table;
  table.add("bonds_old.csv", "molecule\n");
  Faults faults;
  table.read(faults);
  ASSERT_EQ(faults.list().size(), 1u);
  EXPECT_EQ(faults.list()[0].file, "bonds_old.csv");
}

}  // namespace
}  // namespace halostep
