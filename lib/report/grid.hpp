// A plain table of text cells, written aligned for people or as CSV (RFC 4180).
#pragma once
#include <string>
#include <string_view>
#include <vector>

namespace halostep {

struct GridColumn {
  std::string header;
  bool right = false;  // numbers are set to the right
};

struct Grid {
  std::vector<GridColumn> columns;
  std::vector<std::vector<std::string>> rows;
  std::string indent = {};
};

/// Columns that are empty in every row are left out; no blanks at line ends.
std::string aligned(const Grid& grid);
/// RFC 4180: CRLF line ends, quotes where needed; every column is kept.
std::string csv(const Grid& grid);
/// Characters (UTF-8 code points) a text takes on the screen.
std::size_t display_width(std::string_view text);
/// Text broken at blanks into lines of at most `width`, each after `indent`.
std::string wrapped(std::string_view text, std::size_t width, std::string_view indent);

}  // namespace halostep
