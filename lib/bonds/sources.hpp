// Lists of sources (indices into Table::sources) without repetition, in the order they came in.
#pragma once
#include <algorithm>
#include <vector>

namespace halostep {

inline void add_source(std::vector<int>& into, int source) {
  if (std::find(into.begin(), into.end(), source) == into.end()) into.push_back(source);
}

inline void add_sources(std::vector<int>& into, const std::vector<int>& more) {
  for (const int s : more) add_source(into, s);
}

}  // namespace halostep
