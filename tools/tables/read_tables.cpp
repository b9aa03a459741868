#include "tables/read_tables.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <filesystem>
#include <set>

#include "tables/adjust_table.hpp"
#include "tables/read_bonds.hpp"
#include "tables/read_rates.hpp"
#include "tables/read_species.hpp"

namespace halostep {
namespace {

constexpr const char* kList = "file_list.txt";
constexpr std::array kFiles = {"sources.csv",        "bonds_rh.csv",          "bonds_rx.csv",
                               "species.csv",        "rates_abstraction.csv", "rates_other.csv",
                               "relative_rates.csv", "mixtures.csv",          "left_out.csv"};

/// file_list.txt must name the files this compiler reads, in their order.
void check_list(const std::string& dir, Faults& faults) {
  const auto text = read_text(dir, kList, faults);
  if (!text) return;
  std::size_t from = 0, i = 0;
  int line = 0;
  while (from < text->size()) {
    const auto end = std::min(text->find('\n', from), text->size());
    const auto name = text->substr(from, end - from);
    ++line;
    if (i >= kFiles.size())
      faults.add(kList, line, fmt::format("'{}' is one file too many", name));
    else if (name != kFiles[i])
      faults.add(kList, line, fmt::format("'{}' where '{}' belongs", name, kFiles[i]));
    ++i;
    from = end + 1;
  }
  if (i < kFiles.size()) faults.add(kList, line, fmt::format("'{}' and what follows it are missing", kFiles[i]));
}

/// A CSV file nobody reads would be taken for part of the table.
void check_strays(const std::string& dir, Faults& faults) {
  std::set<std::string> strays;
  std::error_code ec;
  for (const auto& entry : std::filesystem::directory_iterator(dir, ec)) {
    const auto name = entry.path().filename().string();
    if (name.ends_with(".csv") && std::find(kFiles.begin(), kFiles.end(), name) == kFiles.end()) strays.insert(name);
  }
  for (const auto& name : strays)
    faults.add(name, 0, fmt::format("not a file of the table: {} does not name it", kList));
}

std::size_t read_left_out(const std::string& dir, Faults& faults) {
  const auto sheet = read_sheet(dir, "left_out.csv", {"file", "key", "value", "source", "reason"}, faults);
  for (std::size_t i = 0; i < sheet.lines.size(); ++i) {
    const Row row(sheet, i, faults);
    for (const auto* column : {"file", "key", "source", "reason"}) row.needed(column);
  }
  return sheet.lines.size();
}

}  // namespace

Curated read_tables(const std::string& dir, Faults& faults) {
  Curated out;
  auto& t = out.table;
  t.layout = kTableLayout;
  t.origin = dir;
  check_list(dir, faults);
  check_strays(dir, faults);
  Structures structures;
  SourceBook sources(dir, t, faults);
  const auto bonds = read_bonds(dir, t, sources, structures, faults);
  const std::array<std::size_t, kFiles.size()> rows = {t.sources.size(),
                                                       bonds.rh,
                                                       bonds.rx,
                                                       read_species(dir, t, sources, structures, faults),
                                                       read_abstraction(dir, t, sources, structures, faults),
                                                       read_other_rates(dir, t, sources, faults),
                                                       read_relative_rates(dir, t, sources, structures, faults),
                                                       read_mixtures(dir, t, sources, structures, faults),
                                                       read_left_out(dir, faults)};
  for (std::size_t i = 0; i < rows.size(); ++i) out.rows_per_file.emplace_back(kFiles[i], rows[i]);
  // Without the rows of a whole file every source of it would seem unused.
  const bool all_read = std::none_of(out.rows_per_file.begin(), out.rows_per_file.end(), [&](const auto& file) {
    return file.second == 0 && std::any_of(faults.list().begin(), faults.list().end(),
                                           [&](const Fault& f) { return f.file == file.first; });
  });
  if (all_read) sources.tell_unused(faults);
  if (faults.none()) {
    if (const auto error = adjust_table(t)) faults.add("species.csv", 0, "joint adjustment: " + error->message);
  }
  faults.sort([](const std::string& file) { return std::find(kFiles.begin(), kFiles.end(), file) - kFiles.begin(); });
  return out;
}

}  // namespace halostep
