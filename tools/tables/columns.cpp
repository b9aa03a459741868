#include "tables/columns.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <iterator>

#include "halostep/quantity.hpp"
#include "tables/csv_reader.hpp"

namespace halostep {
namespace {

/// Line number at the end of "line N"; 0 when there is none.
int line_of(const std::string& place) {
  int line = 0;
  const auto blank = place.rfind(' ');
  if (blank != std::string::npos) std::from_chars(place.data() + blank + 1, place.data() + place.size(), line);
  return line;
}

/// Where each wanted column stands in the header; empty when the header is at fault.
std::vector<std::size_t> find_columns(const CsvRecord& header, const Sheet& sheet, Faults& faults) {
  bool sound = true;
  const auto fault = [&](const char* what, const std::string& name) {
    faults.add(sheet.file, header.line, fmt::format("{} column '{}'", what, name));
    sound = false;
  };
  const auto& names = header.fields;
  for (std::size_t i = 0; i < names.size(); ++i) {
    const auto here = names.begin() + static_cast<std::ptrdiff_t>(i);
    if (std::find(sheet.columns.begin(), sheet.columns.end(), names[i]) == sheet.columns.end()) {
      fault("unknown", names[i]);
    } else if (std::find(names.begin(), here, names[i]) != here) {
      fault("doubled", names[i]);
    }
  }
  std::vector<std::size_t> at;
  for (const auto& name : sheet.columns) {
    const auto it = std::find(names.begin(), names.end(), name);
    if (it == names.end()) fault("missing", name);
    at.push_back(static_cast<std::size_t>(it - names.begin()));
  }
  if (!sound) at.clear();
  return at;
}

bool inside(double v, const Range& r) { return v <= r.hi && (r.above ? v > r.lo : v >= r.lo); }

std::string range_words(const Range& r) {
  const char* lower = r.above ? "above" : "at least";
  if (std::isinf(r.hi)) return fmt::format("{} {}", lower, r.lo);
  if (std::isinf(r.lo)) return fmt::format("at most {}", r.hi);
  return r.above ? fmt::format("above {} up to {}", r.lo, r.hi) : fmt::format("{} to {}", r.lo, r.hi);
}

}  // namespace

std::optional<std::string> read_text(const std::string& dir, const std::string& file, Faults& faults) {
  const auto path = std::filesystem::path(dir) / file;
  std::error_code ec;
  std::ifstream in(path, std::ios::binary);
  if (!std::filesystem::is_regular_file(path, ec) || !in) {
    faults.add(file, 0, "no such file, or it cannot be read");
    return std::nullopt;
  }
  return std::string(std::istreambuf_iterator<char>(in), {});
}

Sheet read_sheet(const std::string& dir, const std::string& file, const std::vector<std::string>& columns,
                 Faults& faults) {
  Sheet sheet{file, columns, {}};
  const auto text = read_text(dir, file, faults);
  if (!text) return sheet;
  auto records = read_csv(*text);
  if (!records.ok()) {
    faults.add(file, line_of(records.error().place), records.error().message);
    return sheet;
  }
  if (records.value().empty()) {
    faults.add(file, 0, "no header line");
    return sheet;
  }
  const auto& header = records.value().front();
  const auto at = find_columns(header, sheet, faults);
  if (at.empty()) return sheet;
  for (std::size_t i = 1; i < records.value().size(); ++i) {
    auto& record = records.value()[i];
    if (record.fields.size() != header.fields.size()) {
      faults.add(file, record.line,
                 fmt::format("{} fields where the header has {}", record.fields.size(), header.fields.size()));
      continue;
    }
    Sheet::Line line{record.line, {}};
    for (const auto k : at) line.fields.push_back(std::move(record.fields[k]));
    sheet.lines.push_back(std::move(line));
  }
  return sheet;
}

const std::string& Row::text(std::string_view column) const {
  const auto it = std::find(sheet_.columns.begin(), sheet_.columns.end(), column);
  return line_.fields.at(static_cast<std::size_t>(it - sheet_.columns.begin()));
}

const std::string& Row::needed(std::string_view column) const {
  const auto& value = text(column);
  if (value.empty()) fault(fmt::format("{} is empty", column));
  return value;
}

const std::string& Row::word(std::string_view column, Words list) const {
  const auto& value = text(column);
  if (std::find(list.begin(), list.end(), value) == list.end()) {
    fault(fmt::format("{} '{}' is unknown; known: {}", column, value, fmt::join(list, ", ")));
  }
  return value;
}

std::optional<double> Row::number(std::string_view column, Range range) const {
  const auto& value = text(column);
  if (value.empty()) return std::nullopt;
  const auto parsed = parse_number(value);
  if (!parsed.ok()) {
    fault(fmt::format("{} '{}' is not a number", column, value));
    return std::nullopt;
  }
  if (!inside(parsed.value(), range)) {
    fault(fmt::format("{} {} is out of range: {}", column, value, range_words(range)));
    return std::nullopt;
  }
  return parsed.value();
}

double Row::needed_number(std::string_view column, Range range) const {
  return needed(column).empty() ? 0.0 : number(column, range).value_or(0.0);
}

int Row::needed_count(std::string_view column, int lo, int hi) const {
  const double v = needed_number(column, {static_cast<double>(lo), static_cast<double>(hi), false});
  if (v != std::floor(v)) fault(fmt::format("{} {} is not a whole number", column, text(column)));
  return static_cast<int>(v);
}

}  // namespace halostep
