// Strict reader for the curated CSV files.
// Own code, because no reader packaged for Debian tells the line of a record and refuses what our files may not
// hold (libcsv is lenient and counts no lines, libfccp takes no quoted line breaks).
#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "halostep/error.hpp"

namespace halostep {

struct CsvRecord {
  int line = 0;  // 1-based line on which the record starts
  std::vector<std::string> fields;
};

/// RFC 4180 with LF line ends: comma, double quotes, no blank lines, UTF-8 without a byte order mark.
/// Errors: syntax, with `place` = "line N".
Result<std::vector<CsvRecord>> read_csv(std::string_view text);

}  // namespace halostep
