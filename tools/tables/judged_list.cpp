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
  const int all = judged + excluded;
  return all == 0 ? 0 : static_cast<double>(excluded) / all;
}

JudgedCount count_judged(const Section& s, const std::string& prefix) {
  JudgedCount n;
  for (const auto& r : s.judged) {
    if (!r.group.starts_with(prefix)) continue;
    ++(r.state == Judged::yes ? n.judged : r.state == Judged::excluded ? n.excluded : n.not_asked);
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
