// Columns of a curated file by name; every fault is told with file and line.
#pragma once
#include <array>
#include <limits>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "tables/faults.hpp"

namespace halostep {

using Words = std::span<const std::string_view>;

namespace words {
using W = std::string_view;
inline constexpr auto method = std::to_array<W>({"measured", "evaluated", "derived", "computed"});
inline constexpr auto provenance = std::to_array<W>({"read", "memory"});
inline constexpr auto coverage = std::to_array<W>({"1s", "2s", "95%", "none", "unstated"});
inline constexpr auto status = std::to_array<W>({"current", "superseded"});
inline constexpr auto energy = std::to_array<W>({"kJ/mol", "kcal/mol"});
inline constexpr auto phase = std::to_array<W>({"g", "l", "c"});
inline constexpr auto carrier = std::to_array<W>({"F", "Cl", "Br", "I"});
inline constexpr auto use = std::to_array<W>({"fit", "show"});
inline constexpr auto source_kind =
    std::to_array<W>({"measurement", "evaluation", "compilation", "textbook", "computation", "practice"});
inline constexpr auto doi_basis = std::to_array<W>({"read", "rule", "memory"});
inline constexpr auto step =
    std::to_array<W>({"halogen-transfer", "reverse-abstraction", "recombination", "disproportionation", "dissociation",
                      "addition", "beta-scission", "ring-opening", "elimination", "oxygen"});
inline constexpr auto rate_unit = std::to_array<W>({"cm3", "cm6", "s-1"});
}  // namespace words

/// Closed interval; with `above` the lower end itself is out.
struct Range {
  double lo = -std::numeric_limits<double>::infinity();
  double hi = std::numeric_limits<double>::infinity();
  bool above = false;
};

struct RowPlace {
  std::string file;
  int line = 0;
};

/// One file with its columns found.
struct Sheet {
  std::string file;
  std::vector<std::string> columns;  // as asked for
  struct Line {
    int line = 0;
    std::vector<std::string> fields;  // in the order of `columns`
  };
  std::vector<Line> lines;
};

/// Reads `file` of directory `dir`. Header faults, unreadable text and lines with too few or too many fields are
/// added to `faults`; lines that can be read are returned all the same.
Sheet read_sheet(const std::string& dir, const std::string& file, const std::vector<std::string>& columns,
                 Faults& faults);
/// The whole of a file; adds a fault and returns nothing when it cannot be read.
std::optional<std::string> read_text(const std::string& dir, const std::string& file, Faults& faults);

/// One line of a sheet. Asking for a column that the sheet was not read with is a programming error.
class Row {
 public:
  Row(const Sheet& sheet, std::size_t i, Faults& faults) : sheet_(sheet), line_(sheet.lines[i]), faults_(faults) {}

  [[nodiscard]] RowPlace place() const { return {sheet_.file, line_.line}; }
  void fault(std::string reason) const { faults_.add(sheet_.file, line_.line, std::move(reason)); }

  [[nodiscard]] const std::string& text(std::string_view column) const;
  /// Text that may not be empty.
  const std::string& needed(std::string_view column) const;
  /// One of `list`.
  const std::string& word(std::string_view column, Words list) const;
  /// A number within `range`; nothing when the field is empty or at fault.
  [[nodiscard]] std::optional<double> number(std::string_view column, Range range) const;
  /// A number that may not be missing; 0 when it is, or is at fault.
  [[nodiscard]] double needed_number(std::string_view column, Range range) const;
  /// A whole number that may not be missing; 0 when it is, or is at fault.
  [[nodiscard]] int needed_count(std::string_view column, int lo, int hi) const;

 private:
  const Sheet& sheet_;
  const Sheet::Line& line_;
  Faults& faults_;
};

}  // namespace halostep
