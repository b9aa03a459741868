// The targets of the model beside what was measured, at the head of the report.
#pragma once
#include <nlohmann/json_fwd.hpp>
#include <string>

namespace halostep {

/// One entry per target, from the document's sections: target, figure (null: none), unit, bound, met.
nlohmann::json summary_json(const nlohmann::json& doc);
std::string summary_markdown(const nlohmann::json& summary);

}  // namespace halostep
