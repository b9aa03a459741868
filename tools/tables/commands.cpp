#include "tables/commands.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cstdio>
#include <filesystem>
#include <optional>

#include "tables/adjust_network.hpp"
#include "tables/columns.hpp"
#include "tables/fit.hpp"
#include "tables/fitted_file.hpp"
#include "tables/hammond.hpp"
#include "tables/read_tables.hpp"
#include "tables/table_io.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

constexpr std::size_t kMostFaults = 50;

std::string in_dir(const std::string& dir, const std::string& file) {
  return (std::filesystem::path(dir) / file).string();
}

int tell(const std::string& dir, const Faults& faults) {
  const auto& list = faults.list();
  for (std::size_t i = 0; i < std::min(list.size(), kMostFaults); ++i) {
    fmt::print(stderr, "{}:{}: {}\n", in_dir(dir, list[i].file), list[i].line, list[i].reason);
  }
  if (list.size() > kMostFaults) fmt::print(stderr, "... and {} more faults\n", list.size() - kMostFaults);
  return list.empty() ? 0 : 1;
}

std::optional<Curated> checked(const std::string& dir) {
  Faults faults;
  auto curated = read_tables(dir, faults);
  if (tell(dir, faults) != 0) return std::nullopt;
  return curated;
}

/// The models of fitted.json, proven to belong to the rows.
std::optional<std::vector<FittedModel>> proven_models(const std::string& dir, const Table& table, Faults& faults) {
  auto file = read_fitted(in_dir(dir, kFittedFile));
  if (!file.ok()) {
    faults.add(kFittedFile, 0, file.error().message);
    return std::nullopt;
  }
  const auto hash = input_hash(table);
  if (file.value().input_hash != hash) {
    faults.add(
        kFittedFile, 0,
        fmt::format("fitted to rows of hash {}, the rows have {}; 'refit' renews it", file.value().input_hash, hash));
    return std::nullopt;
  }
  const auto fitted = fit_models(table);
  if (!fitted.ok()) {
    faults.add(kFittedFile, 0, fmt::format("the fit cannot be repeated: {}", fitted.error().message));
    return std::nullopt;
  }
  for (auto& line : model_differences(file.value().models, fitted.value())) {
    faults.add(kFittedFile, 0, std::move(line));
  }
  if (!faults.none()) return std::nullopt;
  return std::move(file.value().models);
}

void print_counts(const Curated& c) {
  for (const auto& [file, rows] : c.rows_per_file) fmt::print("{:<24}{:>6} rows\n", file, rows);
  const auto& t = c.table;
  const auto hydrogen = std::count_if(t.bonds.begin(), t.bonds.end(), [](const auto& b) { return b.leaving == "[H]"; });
  const auto others = static_cast<std::ptrdiff_t>(t.bonds.size()) - hydrogen;
  const auto current = [](const auto& rows, bool x_h) {
    return std::count_if(rows.begin(), rows.end(),
                         [&](const auto& r) { return !r.superseded && (r.leaving == "[H]") == x_h; });
  };
  const auto enthalpies =
      std::count_if(t.species.begin(), t.species.end(), [](const auto& s) { return s.dfh298.has_value(); });
  const auto rates = std::count_if(t.rates.begin(), t.rates.end(), [](const auto& r) { return !r.superseded; });
  fmt::print("distinct X-H bonds      {:>6} from {} current rows\n", hydrogen, current(t.bond_rows, true));
  fmt::print("other bonds             {:>6} from {} current rows\n", others, current(t.bond_rows, false));
  fmt::print("species                 {:>6}, {} with an enthalpy of formation\n", t.species.size(), enthalpies);
  fmt::print("rate rows               {:>6}, {} of them current\n", t.rates.size(), rates);
}

}  // namespace

int check_command(const std::string& dir) {
  const auto curated = checked(dir);
  if (!curated) return 1;
  print_counts(*curated);
  return 0;
}

int compile_command(const std::string& dir, const std::string& out) {
  auto curated = checked(dir);
  if (!curated) return 1;
  Faults faults;
  const auto schema = read_text(dir, "schema.sql", faults);
  auto models = proven_models(dir, curated->table, faults);
  if (!schema || !models) return tell(dir, faults);
  curated->table.models = std::move(*models);
  if (const auto error = write_table(curated->table, *schema, out)) {
    fmt::print(stderr, "{}:0: {}\n", out, error->message);
    return 1;
  }
  return 0;
}

int refit_command(const std::string& dir) {
  const auto curated = checked(dir);
  if (!curated) return 1;
  Faults faults;
  auto fitted = fit_models(curated->table);
  if (!fitted.ok()) {
    faults.add(kFittedFile, 0, fmt::format("the fit failed: {}", fitted.error().message));
    return tell(dir, faults);
  }
  const FittedFile file{input_hash(curated->table), std::move(fitted).value()};
  if (const auto error = write_fitted(file, in_dir(dir, kFittedFile))) faults.add(kFittedFile, 0, error->message);
  return tell(dir, faults);
}

int validate_command(const std::string& dir, const ValidateFiles& files) {
  const auto curated = checked(dir);
  return curated ? validate(curated->table, files) : 1;
}

int hammond_command(const std::string& dir, const std::string& markdown) {
  auto curated = checked(dir);
  if (!curated) return 1;
  Faults faults;
  auto file = read_fitted(in_dir(dir, kFittedFile));
  if (!file.ok()) {
    faults.add(kFittedFile, 0, file.error().message);
    return tell(dir, faults);
  }
  curated->table.models = std::move(file.value().models);
  return hammond(std::move(curated->table), markdown);
}

int adjust_command(const std::string& dir, const std::string& csv) {
  const auto curated = checked(dir);
  return curated ? adjust_report(curated->table, csv) : 1;
}

}  // namespace halostep
