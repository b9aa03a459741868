// Which rows judge the engine: the list that is frozen in tests/reference/judged_rows.csv.
#pragma once
#include <functional>
#include <string>
#include <vector>

namespace halostep {

struct Section;

enum class Judged {
  yes,
  excluded,   // answered at least in part, but set aside
  refused,    // the engine gives no answer
  not_asked,  // no measurement of what is asked
};

/// One row of the table and whether it judges.
struct JudgedRow {
  std::string group, key;
  Judged state = Judged::yes;
  std::string reason;  // empty only where it judges
};

struct JudgedCount {
  int judged = 0, excluded = 0, refused = 0, not_asked = 0;
  /// Of those that could judge.
  [[nodiscard]] double excluded_share() const;
  [[nodiscard]] double left_out_share() const;
};

/// Rows of the section in the groups wanted.
JudgedCount count_judged(const Section& s, const std::function<bool(const std::string&)>& wanted);

/// CSV in order of section and key; equal keys are told apart by a number.
std::string judged_csv(const std::vector<const Section*>& sections);

}  // namespace halostep
