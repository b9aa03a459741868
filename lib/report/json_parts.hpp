// Building blocks of the JSON reports: keys are always there, null has a reason in `why`, never NaN.
#pragma once
#include <nlohmann/json.hpp>
#include <optional>
#include <span>
#include <string>

#include "halostep/report.hpp"

namespace halostep {

using Json = nlohmann::ordered_json;

/// One JSON object under construction: collects the reasons of its null keys.
class JsonRecord {
 public:
  void put(const char* key, Json value) { json_[key] = std::move(value); }
  /// Text, or null with `reason` when empty.
  void put_text(const char* key, const std::string& text, std::string reason);
  /// Number rounded to `digits` significant digits, or null with `reason`.
  void put_number(const char* key, std::optional<double> value, int digits, std::string reason = {});
  void put_null(const char* key, std::string reason);
  void add_reason(const char* key, std::string reason);
  /// Adds `why` (an object from key to reason, null when no key needs one) and hands the object over.
  Json finish();

 private:
  Json json_ = Json::object();
  Json why_ = Json::object();
};

/// Rounded so that the same answer gives the same text on every machine.
double rounded(double value, int digits) noexcept;
/// {class, message, place} or null.
Json json_error(const std::optional<Error>& error);
/// [{id, citation, year, doi, why}]
Json json_sources(const Table& table, std::span<const int> sources);
/// schema, table, units.
Json json_top(const Table& table, const char* schema);
/// input, name, smiles, formula and error of a substrate.
void put_head(JsonRecord& record, const SubstrateHead& head);
/// The document as text; bytes that are not UTF-8 are replaced.
std::string dumped(const Json& json);

}  // namespace halostep
