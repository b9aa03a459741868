#include "tables/evidence.hpp"

#include <algorithm>
#include <string_view>

namespace halostep {
namespace {

constexpr const char* kFile = "sources.csv";

bool sound_id(const std::string& id) {
  return !id.empty() && id.find_first_not_of("abcdefghijklmnopqrstuvwxyz0123456789_-") == std::string::npos;
}

/// 10., four to nine digits, a slash and text without blanks (ISO 26324; DOI Handbook, 2.2).
bool sound_doi(std::string_view doi) {
  if (!doi.starts_with("10.")) return false;
  doi.remove_prefix(3);
  const auto digits = doi.find_first_not_of("0123456789");
  return digits >= 4 && digits <= 9 && doi[digits] == '/' && doi.size() > digits + 1 &&
         std::none_of(doi.begin(), doi.end(), [](unsigned char c) { return c <= ' ' || c == 0x7F; });
}

SourceRow read_source(const Row& row) {
  SourceRow s;
  s.id = row.text("id");
  if (!sound_id(s.id)) row.fault(fmt::format("id '{}' is not lower-case letters, digits, '_' and '-'", s.id));
  s.citation = row.needed("citation");
  s.doi = row.text("doi");
  if (!s.doi.empty()) {
    if (!sound_doi(s.doi)) row.fault(fmt::format("doi '{}' is not of the form 10.1234/text", s.doi));
    s.doi_basis = row.word("doi_basis", words::doi_basis);
  } else if (!row.text("doi_basis").empty()) {
    row.fault("doi_basis without a doi");
  }
  s.kind = row.word("kind", words::source_kind);
  if (!row.text("year").empty()) s.year = row.needed_count("year", 1850, 2100);
  return s;
}

}  // namespace

SourceBook::SourceBook(const std::string& dir, Table& table, Faults& faults) {
  const auto sheet = read_sheet(dir, kFile, {"id", "citation", "year", "doi", "doi_basis", "kind"}, faults);
  for (std::size_t i = 0; i < sheet.lines.size(); ++i) {
    const Row row(sheet, i, faults);
    auto source = read_source(row);
    const int index = static_cast<int>(table.sources.size());
    const auto [it, added] = known_.try_emplace(source.id, Known{index, row.place().line, !sound_id(source.id)});
    if (!added) row.fault(fmt::format("source '{}' is already in line {}", source.id, it->second.line));
    table.sources.push_back(std::move(source));
  }
}

int SourceBook::use(const Row& row) {
  const auto& id = row.needed("source");
  if (id.empty()) return -1;
  const auto it = known_.find(id);
  if (it == known_.end()) {
    row.fault(fmt::format("source '{}' is not in {}", id, kFile));
    return -1;
  }
  it->second.used = true;
  return it->second.index;
}

void SourceBook::tell_unused(Faults& faults) const {
  std::set<std::pair<int, std::string>> unused;
  for (const auto& [id, known] : known_) {
    if (!known.used) unused.emplace(known.line, id);
  }
  for (const auto& [line, id] : unused) faults.add(kFile, line, fmt::format("source '{}' is used by no row", id));
}

void Duplicates::check(const Row& row, std::string what) {
  const auto [it, added] = line_.try_emplace(std::move(what), row.place().line);
  if (!added) row.fault(fmt::format("the same as line {}: bond or reaction, value and source are equal", it->second));
}

}  // namespace halostep
