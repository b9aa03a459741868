// What is wrong with the curated files: all of it, not only the first.
#pragma once
#include <algorithm>
#include <string>
#include <utility>
#include <vector>

namespace halostep {

/// One fault; `file` is the name inside the directory of the table, `line` is 1-based (0: the file as a whole).
struct Fault {
  std::string file;
  int line = 0;
  std::string reason;
};

class Faults {
 public:
  void add(std::string file, int line, std::string reason) {
    list_.push_back({std::move(file), line, std::move(reason)});
  }
  /// By `rank` of the file, then by line; what was found first stays first.
  template <class Rank>
  void sort(Rank rank) {
    std::stable_sort(list_.begin(), list_.end(), [&](const Fault& a, const Fault& b) {
      return std::pair(rank(a.file), a.line) < std::pair(rank(b.file), b.line);
    });
  }
  [[nodiscard]] bool none() const noexcept { return list_.empty(); }
  [[nodiscard]] const std::vector<Fault>& list() const noexcept { return list_; }

 private:
  std::vector<Fault> list_;
};

}  // namespace halostep
