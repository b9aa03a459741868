// Which rows judge the engine: the list that is frozen in tests/reference/judged_rows.csv.
#pragma once
#include <string>
#include <vector>

namespace halostep {

struct Section;

enum class Judged {
  yes,
  excluded,   // could judge, but does not: counts among the excluded
  not_asked,  // no measurement of what is asked
};

/// One row of the table and whether it judges.
struct JudgedRow {
  std::string group, key;
  Judged state = Judged::yes;
  std::string reason;  // empty only where it judges
};

struct JudgedCount {
  int judged = 0, excluded = 0, not_asked = 0;
  /// Of those that could judge.
  [[nodiscard]] double excluded_share() const;
};

/// Rows of the section whose group starts with `prefix`.
JudgedCount count_judged(const Section& s, const std::string& prefix);

/// CSV in order of section and key; equal keys are told apart by a number.
std::string judged_csv(const std::vector<const Section*>& sections);

}  // namespace halostep
