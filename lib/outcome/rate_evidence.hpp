// Sources of the measured rates behind a rate answer.
#pragma once
#include <mutex>
#include <string>
#include <vector>

#include "halostep/tables.hpp"
#include "kinetics/site.hpp"

namespace halostep {

/// Built at the first question (it parses the structures of the rate rows), then constant; thread-safe.
class RateEvidence {
 public:
  explicit RateEvidence(const Table& table) : table_(table) {}
  /// Sources of the fitted rates of the molecule with this canonical text; where it has none, those with most
  /// fitted rates for the given classes of C-H.
  [[nodiscard]] std::vector<int> sources(int x, const std::string& key, const std::vector<AClass>& classes) const;

 private:
  struct Known {
    int carrier = 0, source = 0;
    std::string key;
    std::vector<AClass> classes;
  };
  void read() const;
  const Table& table_;
  mutable std::once_flag once_;
  mutable std::vector<Known> known_;
};

}  // namespace halostep
