#include "tables/fitted_file.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <filesystem>
#include <fstream>
#include <iterator>
#include <nlohmann/json.hpp>

#include "tables/table_io.hpp"

namespace halostep {
namespace {

using Json = nlohmann::ordered_json;

std::string number(double v) { return fmt::format("{:.17g}", v); }
std::string quoted(const std::string& text) { return Json(text).dump(); }

std::string model_text(const FittedModel& m) {
  std::string out = fmt::format("    {{\n      \"name\": {},\n      \"parameters\": [", quoted(m.name));
  const auto n = m.parameters.size();
  for (std::size_t i = 0; i < n; ++i) {
    out += fmt::format("{}\n        {{\"name\": {}, \"value\": {}, \"support\": {}}}", i == 0 ? "" : ",",
                       quoted(m.parameters[i]), number(m.values[i]), m.support[i]);
  }
  out += "\n      ],\n      \"settings\": [";
  for (std::size_t i = 0; i < m.settings.size(); ++i) {
    out += fmt::format("{}\n        {{\"name\": {}, \"value\": {}}}", i == 0 ? "" : ",", quoted(m.settings[i].first),
                       number(m.settings[i].second));
  }
  out += "\n      ],\n      \"covariance\": [";
  for (std::size_t i = 0; i < n; ++i) {
    out += i == 0 ? "\n        [" : ",\n        [";
    for (std::size_t j = 0; j <= i; ++j) out += (j == 0 ? "" : ", ") + number(m.covariance[i * n + j]);
    out += "]";
  }
  return out + "\n      ]\n    }";
}

Error fault(std::string what) { return {ErrorClass::table, std::move(what), kFittedFile}; }

bool has(const Json& j, const char* key, bool (Json::*is)() const noexcept) {
  return j.is_object() && j.contains(key) && (j.at(key).*is)();
}

/// Lower triangle to the full matrix; false when its shape is not n x n.
bool read_covariance(const Json& rows, std::size_t n, std::vector<double>& out) {
  if (rows.size() != n) return false;
  out.assign(n * n, 0.0);
  for (std::size_t i = 0; i < n; ++i) {
    if (!rows[i].is_array() || rows[i].size() != i + 1) return false;
    for (std::size_t j = 0; j <= i; ++j) {
      if (!rows[i][j].is_number()) return false;
      out[i * n + j] = out[j * n + i] = rows[i][j].get<double>();
    }
  }
  return true;
}

Result<FittedModel> parse_model(const Json& j, std::size_t number_of_model) {
  FittedModel m;
  if (!has(j, "name", &Json::is_string)) return fault(fmt::format("model {} has no name", number_of_model + 1));
  m.name = j.at("name").get<std::string>();
  for (const auto* key : {"parameters", "settings", "covariance"}) {
    if (!has(j, key, &Json::is_array)) return fault(fmt::format("model '{}' has no list '{}'", m.name, key));
  }
  for (const auto& p : j.at("parameters")) {
    if (!has(p, "name", &Json::is_string) || !has(p, "value", &Json::is_number) ||
        !has(p, "support", &Json::is_number_integer)) {
      return fault(fmt::format("model '{}': parameter {} needs name, value and support", m.name, m.values.size() + 1));
    }
    m.parameters.push_back(p.at("name").get<std::string>());
    m.values.push_back(p.at("value").get<double>());
    m.support.push_back(p.at("support").get<int>());
  }
  for (const auto& s : j.at("settings")) {
    if (!has(s, "name", &Json::is_string) || !has(s, "value", &Json::is_number)) {
      return fault(fmt::format("model '{}': setting {} needs name and value", m.name, m.settings.size() + 1));
    }
    m.settings.emplace_back(s.at("name").get<std::string>(), s.at("value").get<double>());
  }
  if (!read_covariance(j.at("covariance"), m.values.size(), m.covariance)) {
    return fault(fmt::format("model '{}': the covariance is no lower triangle of {} rows", m.name, m.values.size()));
  }
  return m;
}

}  // namespace

std::string input_hash(const Table& table) {
  Table rows = table;
  rows.layout = kTableLayout;
  rows.models.clear();
  // Computed numbers may differ in the last digit from machine to machine.
  rows.adjusted.clear();
  for (auto& b : rows.bonds) b.d298 = b.combined;
  for (auto& s : rows.species) s.dfh298 = s.combined;
  return content_hash(rows);
}

std::string fitted_text(const FittedFile& file) {
  std::string out = fmt::format("{{\n  \"input_sha256\": {},\n  \"models\": [", quoted(file.input_hash));
  for (std::size_t i = 0; i < file.models.size(); ++i) out += (i == 0 ? "\n" : ",\n") + model_text(file.models[i]);
  return out + "\n  ]\n}\n";
}

Result<FittedFile> parse_fitted(const std::string& text) {
  const auto j = Json::parse(text, nullptr, false);
  if (j.is_discarded()) return fault("not readable as JSON");
  if (!has(j, "input_sha256", &Json::is_string)) return fault("no text 'input_sha256'");
  if (!has(j, "models", &Json::is_array)) return fault("no list 'models'");
  FittedFile file{j.at("input_sha256").get<std::string>(), {}};
  for (const auto& model : j.at("models")) {
    auto m = parse_model(model, file.models.size());
    if (!m.ok()) return m.error();
    file.models.push_back(std::move(m).value());
  }
  return file;
}

Result<FittedFile> read_fitted(const std::string& path) {
  std::error_code ec;
  std::ifstream in(path, std::ios::binary);
  if (!std::filesystem::is_regular_file(path, ec) || !in) {
    return Error{ErrorClass::io, "no such file, or it cannot be read; 'refit' makes it", path};
  }
  return parse_fitted(std::string(std::istreambuf_iterator<char>(in), {}));
}

std::optional<Error> write_fitted(const FittedFile& file, const std::string& path) {
  const std::string part = fmt::format("{}.{}.part", path, ::getpid());
  std::error_code ec;
  std::ofstream out(part, std::ios::binary);
  out << fitted_text(file);
  out.close();
  if (!out) {
    std::filesystem::remove(part, ec);
    return Error{ErrorClass::io, fmt::format("cannot write '{}'", part), path};
  }
  std::filesystem::rename(part, path, ec);
  if (!ec) return std::nullopt;
  const std::string why = ec.message();
  std::filesystem::remove(part, ec);
  return Error{ErrorClass::io, fmt::format("cannot put the new file at '{}': {}", path, why), path};
}

}  // namespace halostep
