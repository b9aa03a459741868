#include "json_parts.hpp"

#include <charconv>
#include <cmath>

namespace halostep {

double rounded(double value, int digits) noexcept {
  char buffer[40];
  const auto written = std::to_chars(buffer, buffer + sizeof buffer, value, std::chars_format::scientific, digits - 1);
  double out = value;
  std::from_chars(buffer, written.ptr, out);
  return out == 0.0 ? 0.0 : out;  // no minus zero
}

void JsonRecord::add_reason(const char* key, std::string reason) {
  why_[key] = reason.empty() ? std::string("not known") : std::move(reason);
}

void JsonRecord::put_null(const char* key, std::string reason) {
  json_[key] = nullptr;
  add_reason(key, std::move(reason));
}

void JsonRecord::put_text(const char* key, const std::string& text, std::string reason) {
  if (text.empty()) {
    put_null(key, std::move(reason));
  } else {
    put(key, text);
  }
}

void JsonRecord::put_number(const char* key, std::optional<double> value, int digits, std::string reason) {
  if (!value) {
    put_null(key, std::move(reason));
  } else if (!std::isfinite(*value)) {
    put_null(key, "the calculation gave no finite number");
  } else {
    put(key, rounded(*value, digits));
  }
}

Json JsonRecord::finish() {
  json_["why"] = why_.empty() ? Json(nullptr) : std::move(why_);
  return std::move(json_);
}

Json json_error(const std::optional<Error>& error) {
  if (!error) return nullptr;
  return {{"class", error_class_name(error->cls)}, {"message", error->message}, {"place", error->place}};
}

Json json_sources(const Table& table, std::span<const int> sources) {
  Json out = Json::array();
  for (const int s : sources) {
    const auto& row = table.sources[static_cast<std::size_t>(s)];
    JsonRecord record;
    record.put("id", row.id);
    record.put("citation", row.citation);
    if (row.year > 0) record.put("year", row.year);
    else record.put_null("year", "the table holds no year for this source");
    record.put_text("doi", row.doi, "the table holds no DOI for this source");
    out.push_back(record.finish());
  }
  return out;
}

Json json_top(const Table& table, const char* schema) {
  Json json = Json::object();
  json["schema"] = schema;
  json["table"] = {{"layout", table.layout}, {"hash", table.content_hash}, {"origin", table.origin}};
  json["units"] =
      "in the names of the keys, whatever --units says; D and dh are at 298.15 K, ds, dg, log10_k, ea and k at "
      "temperature_k; gas, 1 bar; u is the standard uncertainty; share is a mole fraction over C-H sites, low and high "
      "its 95 % range";
  return json;
}

void put_head(JsonRecord& record, const SubstrateHead& head) {
  record.put("input", head.input);
  record.put_text("name", head.name, "the input has no name");
  record.put_text("smiles", head.smiles, "the input could not be read");
  record.put_text("formula", head.formula, "the input could not be read");
  record.put("error", json_error(head.error));
}

std::string dumped(const Json& json) { return json.dump(1, ' ', false, Json::error_handler_t::replace) + '\n'; }

}  // namespace halostep
