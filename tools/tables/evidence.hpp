// Columns that every row of evidence has: where it comes from and whether it still counts.
#pragma once
#include <fmt/format.h>

#include <set>
#include <string>
#include <unordered_map>

#include "halostep/tables.hpp"
#include "tables/columns.hpp"

namespace halostep {

/// Reads sources.csv and keeps account of which source is used.
class SourceBook {
 public:
  SourceBook(const std::string& dir, Table& table, Faults& faults);
  /// Index of the source a row names; a fault and -1 when there is none.
  int use(const Row& row);
  /// Adds a fault for each source that no row names.
  void tell_unused(Faults& faults) const;

 private:
  struct Known {
    int index = 0, line = 0;
    bool used = false;
  };
  std::unordered_map<std::string, Known> known_;
};

/// Tells rows that say the same twice.
class Duplicates {
 public:
  /// `what` is all that tells two rows apart; a fault when it was there before.
  void check(const Row& row, std::string what);

 private:
  std::unordered_map<std::string, int> line_;
};

/// method, provenance, source, status, reason, note.
template <class R>
void read_evidence(const Row& row, SourceBook& sources, R& r) {
  r.method = row.word("method", words::method);
  r.superseded = row.word("status", words::status) == "superseded";
  r.reason = row.text("reason");
  r.note = row.text("note");
  r.provenance = row.word("provenance", words::provenance);
  r.source = sources.use(row);
  if (r.superseded && r.reason.empty()) row.fault("superseded without a reason");
  if (!r.superseded && !r.reason.empty()) row.fault("a reason for being superseded in a current row");
}

}  // namespace halostep
