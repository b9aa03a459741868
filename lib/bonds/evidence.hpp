// Which rows stand behind a typed answer: those of the most similar bonds in the table.
#pragma once
#include <mutex>
#include <vector>

#include "features.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// Built at the first question (it parses the table's structures), then constant; thread-safe.
class Evidence {
 public:
  explicit Evidence(const Table& table) : table_(table) {}
  /// Sources of the X-H bonds most like `f`.
  [[nodiscard]] std::vector<int> hydrogen(const std::vector<FeatureCount>& f) const;
  /// Sources of the halides (x = 0 F .. 3 I) whose exchange is most like `f`.
  [[nodiscard]] std::vector<int> exchange(int x, const std::vector<FeatureCount>& f) const;

 private:
  struct Known {
    std::vector<FeatureCount> features;
    std::vector<int> sources;
  };
  void read_hydrogen() const;
  void read_exchange() const;
  [[nodiscard]] static std::vector<int> nearest(const std::vector<Known>& known, const std::vector<FeatureCount>& f);
  const Table& table_;
  mutable std::once_flag hydrogen_once_, exchange_once_;
  mutable std::vector<Known> hydrogen_, exchange_[4];
};

}  // namespace halostep
