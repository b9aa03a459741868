#include "phrases.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace halostep {

std::string energy_cell(std::optional<double> kj_mol, EnergyUnit unit, int decimals) {
  if (!kj_mol || !std::isfinite(*kj_mol)) return "-";
  return format_fixed(from_kj(*kj_mol, unit), decimals);
}

int decimals_for(double value, int least) noexcept {
  constexpr int kMost = 9;
  const double size = std::abs(value);
  int decimals = least;
  for (double half = 0.5 * std::pow(10.0, -least); size > 0 && size < half && decimals < kMost; half /= 10) ++decimals;
  return decimals;
}

QuantityText quantity_text(const Quantity& q, int least_decimals) {
  const int decimals = decimals_for(q.u, least_decimals);
  return {format_fixed(q.value, decimals), format_fixed(q.u, decimals)};
}

QuantityText energy_text(const std::optional<Quantity>& kj_mol, EnergyUnit unit) {
  if (!kj_mol || !std::isfinite(kj_mol->value)) return {"-", "-"};
  if (!std::isfinite(kj_mol->u)) return {energy_cell(kj_mol->value, unit), "-"};
  return quantity_text({from_kj(kj_mol->value, unit), from_kj(kj_mol->u, unit)}, 1);
}

void add_quantity(std::vector<std::string>& row, const std::optional<Quantity>& q, EnergyUnit unit) {
  auto text = energy_text(q, unit);
  row.push_back(std::move(text.value));
  row.push_back(std::move(text.u));
}

std::string csv_number(std::optional<double> value) {
  if (!value || !std::isfinite(*value)) return {};
  return fmt::format("{:.8g}", *value);
}

std::string csv_energy(std::optional<double> kj_mol, EnergyUnit unit) {
  if (!kj_mol || !std::isfinite(*kj_mol)) return {};
  const double value = from_kj(*kj_mol, unit);
  return format_fixed(value, decimals_for(value, 2) + 1);  // three decimals, or two significant digits
}

std::string percent(double share) {
  const double p = 100 * share;
  const double rest = std::min(p, 100 - p);
  if (rest <= 0 || rest >= 0.05) return format_fixed(p, 1);
  if (rest >= 0.005) return format_fixed(p, 2);
  if (rest >= 0.0005) return format_fixed(p, 3);
  return p < 50 ? "<0.001" : ">99.999";
}

const char* unit_suffix(EnergyUnit unit) noexcept { return unit == EnergyUnit::kj ? "kj_mol" : "kcal_mol"; }

std::string source_ids(const Table& table, std::span<const int> sources) {
  std::string out;
  for (const int s : sources) {
    if (!out.empty()) out += ' ';
    out += table.sources[static_cast<std::size_t>(s)].id;
  }
  return out;
}

std::string source_cell(const Table& table, std::span<const int> sources, std::size_t shown) {
  if (sources.size() <= shown + 1) return source_ids(table, sources);
  return fmt::format("{} +{}", source_ids(table, sources.first(shown)), sources.size() - shown);
}

std::string source_list(const Table& table, const std::set<int>& cited) {
  if (cited.empty()) return {};
  std::vector<const SourceRow*> rows;
  for (const int s : cited) rows.push_back(&table.sources[static_cast<std::size_t>(s)]);
  std::sort(rows.begin(), rows.end(), [](const SourceRow* a, const SourceRow* b) { return a->id < b->id; });
  std::string out = "Sources\n";
  for (const SourceRow* row : rows) {
    std::string line = row->id + ": " + row->citation;
    if (!row->doi.empty() && row->citation.find(row->doi) == std::string::npos) line += " doi:" + row->doi;
    std::string block = wrapped(line, 118, "    ");
    block.erase(0, 2);  // the first line hangs out
    out += block;
  }
  return out + '\n';
}

namespace {

/// An input that could not be read may be anything, also very long.
std::string shortened(const std::string& text) {
  constexpr std::size_t kShown = 200;
  return text.size() <= kShown ? text : text.substr(0, kShown) + "...";
}

}  // namespace

std::string head_text(const SubstrateHead& head) {
  std::string out = head.smiles.empty() ? shortened(head.input) : head.smiles;
  if (!head.formula.empty()) out += "  " + head.formula;
  if (!head.name.empty()) out += "  " + head.name;
  if (!head.smiles.empty() && head.input != head.smiles) out += "  (read from " + shortened(head.input) + ")";
  for (char& c : out) {
    if (static_cast<unsigned char>(c) < 0x20) c = ' ';
  }
  out += '\n';
  if (head.error) out += "  not answered: " + error_line(*head.error) + '\n';
  return out;
}

std::string table_line(const Table& table) {
  return fmt::format("Table layout {}, content hash {}, {}\n", table.layout, table.content_hash.substr(0, 16),
                     table.origin);
}

std::vector<std::string> head_cells(const SubstrateHead& head) {
  return {head.input, head.name, head.smiles, head.formula};
}

std::vector<GridColumn> head_columns() {
  std::vector<GridColumn> columns;
  add_columns(columns, {"input", "name", "smiles", "formula"});
  return columns;
}

std::vector<std::string> error_cells(const std::optional<Error>& error) {
  if (!error) return {"", "", ""};
  return {error_class_name(error->cls), error->message, error->place};
}

std::vector<GridColumn> error_columns() {
  std::vector<GridColumn> columns;
  add_columns(columns, {"error_class", "error_message", "error_place"});
  return columns;
}

void add_columns(std::vector<GridColumn>& columns, std::initializer_list<std::string> names) {
  for (const auto& name : names) columns.push_back({name, false});
}

std::string legend(std::initializer_list<std::string> lines) {
  std::string out;
  for (const auto& line : lines) out += wrapped(line, 118, "");  // nothing for an empty one
  return out + '\n';
}

std::string error_line(const Error& error) {
  std::string out = fmt::format("{}: {}", error_class_name(error.cls), error.message);
  if (!error.place.empty()) out += " (" + error.place + ")";
  for (char& c : out) {
    const auto u = static_cast<unsigned char>(c);
    if (u < 0x20 || u == 0x7F) c = ' ';
  }
  return out;
}

}  // namespace halostep
