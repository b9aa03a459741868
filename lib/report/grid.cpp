#include "grid.hpp"

#include <algorithm>

namespace halostep {

namespace {

void pad(std::string& out, std::string_view cell, std::size_t width, bool right) {
  const std::size_t blanks = width - std::min(width, display_width(cell));
  if (right) out.append(blanks, ' ');
  out += cell;
  if (!right) out.append(blanks, ' ');
}

void end_line(std::string& out) {
  while (!out.empty() && out.back() == ' ') out.pop_back();
  out += '\n';
}

void append_csv(std::string& out, std::string_view cell) {
  if (cell.find_first_of(",\"\r\n") == std::string_view::npos) {
    out += cell;
    return;
  }
  out += '"';
  for (const char c : cell) {
    if (c == '"') out += '"';
    out += c;
  }
  out += '"';
}

}  // namespace

std::size_t display_width(std::string_view text) {
  return static_cast<std::size_t>(
      std::count_if(text.begin(), text.end(), [](char c) { return (static_cast<unsigned char>(c) & 0xC0) != 0x80; }));
}

std::string aligned(const Grid& grid) {
  std::vector<std::size_t> width(grid.columns.size(), 0);  // 0: the column is empty
  for (const auto& row : grid.rows) {
    for (std::size_t c = 0; c < width.size(); ++c) width[c] = std::max(width[c], display_width(row[c]));
  }
  std::string out = grid.indent;
  for (std::size_t c = 0; c < width.size(); ++c) {
    if (width[c] == 0) continue;
    width[c] = std::max(width[c], display_width(grid.columns[c].header));
    pad(out, grid.columns[c].header, width[c], grid.columns[c].right);
    out += "  ";
  }
  end_line(out);
  for (const auto& row : grid.rows) {
    out += grid.indent;
    for (std::size_t c = 0; c < width.size(); ++c) {
      if (width[c] == 0) continue;
      pad(out, row[c], width[c], grid.columns[c].right);
      out += "  ";
    }
    end_line(out);
  }
  return out;
}

std::string csv(const Grid& grid) {
  std::string out;
  for (std::size_t c = 0; c < grid.columns.size(); ++c) {
    if (c > 0) out += ',';
    append_csv(out, grid.columns[c].header);
  }
  out += "\r\n";
  for (const auto& row : grid.rows) {
    for (std::size_t c = 0; c < row.size(); ++c) {
      if (c > 0) out += ',';
      append_csv(out, row[c]);
    }
    out += "\r\n";
  }
  return out;
}

std::string wrapped(std::string_view text, std::size_t width, std::string_view indent) {
  std::string out, line(indent);
  bool fresh = true;
  while (!text.empty()) {
    const std::size_t blank = std::min(text.find(' '), text.size());
    const std::string_view word = text.substr(0, blank);
    text.remove_prefix(std::min(blank + 1, text.size()));
    if (word.empty()) continue;
    if (!fresh && display_width(line) + 1 + display_width(word) > width) {
      out += line + '\n';
      line = indent;
      fresh = true;
    }
    if (!fresh) line += ' ';
    line += word;
    fresh = false;
  }
  return fresh ? out : out + line + '\n';
}

}  // namespace halostep
