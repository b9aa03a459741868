#include "tables/judged_list.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <map>

#include "tables/scores.hpp"

namespace halostep {
namespace {

const char* word(Judged j) {
  switch (j) {
    case Judged::yes: return "no";
    case Judged::excluded: return "yes";
    case Judged::refused: return "refused";
    case Judged::not_asked: return "not asked";
  }
  return "";
}

std::string quoted(const std::string& text) {
  if (text.find_first_of(",\"\n") == std::string::npos) return text;
  std::string out = "\"";
  for (const char c : text) out += c == '"' ? std::string("\"\"") : std::string(1, c);
  return out + '"';
}

}  // namespace

double JudgedCount::excluded_share() const {
  const int all = judged + excluded + refused;
  return all == 0 ? 0 : static_cast<double>(excluded) / all;
}

double JudgedCount::left_out_share() const {
  const int all = judged + excluded + refused;
  return all == 0 ? 0 : static_cast<double>(excluded + refused) / all;
}

JudgedCount count_judged(const Section& s, const std::function<bool(const std::string&)>& wanted) {
  JudgedCount n;
  for (const auto& r : s.judged) {
    if (!wanted(r.group)) continue;
    ++(r.state == Judged::yes        ? n.judged
       : r.state == Judged::excluded ? n.excluded
       : r.state == Judged::refused  ? n.refused
                                     : n.not_asked);
  }
  return n;
}

std::string judged_csv(const std::vector<const Section*>& sections) {
  std::string out = "section,key,class,excluded,reason\n";
  for (const auto* s : sections) {
    std::map<std::string, int> times;
    std::vector<std::string> lines;
    for (const auto& r : s->judged) {
      const int n = ++times[r.key];
      const auto key = n == 1 ? r.key : fmt::format("{} #{}", r.key, n);
      lines.push_back(
          fmt::format("{},{},{},{},{}\n", s->id, quoted(key), quoted(r.group), word(r.state), quoted(r.reason)));
    }
    std::sort(lines.begin(), lines.end());
    for (const auto& l : lines) out += l;
  }
  return out;
}

}  // namespace halostep
