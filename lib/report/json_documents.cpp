// The JSON documents of bonds, steps and outcome.
#include "json_answers.hpp"

namespace halostep {

namespace {

/// Whether the text itself balances: known for an answered step and for one refused as unbalanced.
void put_balance(JsonRecord& record, const Error& error) {
  if (error.cls == ErrorClass::unbalanced) {
    record.put("balanced", false);
  } else if (error.cls == ErrorClass::no_data || error.cls == ErrorClass::domain) {
    record.put("balanced", true);
  } else {
    record.put_null("balanced", "the reaction could not be read");
  }
}

Json refused_reaction(const ReactionRecord& reaction) {
  const Error error = reaction.error.value_or(Error{ErrorClass::no_data, "no answer", {}});
  const std::string reason = error_line(error);
  JsonRecord record;
  record.put("input", reaction.input);
  record.put("error", json_error(error));
  record.put_null("halogen", reason);
  record.put("kind", step_kind_name(StepKind::elementary));
  record.put("reaction", reaction.input);
  put_balance(record, error);
  for (const char* key : {"radical", "temperature_k", "dh_kj_mol", "u_kj_mol", "ds_j_mol_k", "u_ds_j_mol_k", "dg_kj_mol",
                          "u_dg_kj_mol", "log10_k", "u_log10_k", "ea_kj_mol", "u_ea_kj_mol", "k_cm3_s", "u_log10_k_cm3_s", "route"}) {
    record.put_null(key, reason);
  }
  record.put("sources", Json::array());
  return record.finish();
}

Json json_reaction(const Table& table, const ReactionRecord& reaction) {
  if (!reaction.step) return refused_reaction(reaction);
  Json out = Json::object();
  out["input"] = reaction.input;
  out["error"] = nullptr;
  out.update(json_step(table, *reaction.step));
  return out;
}

}  // namespace

std::string bonds_json(const Table& table, std::span<const BondsRecord> records) {
  Json top = json_top(table, "halostep.bonds/1");
  Json molecules = Json::array();
  for (const auto& r : records) {
    JsonRecord record;
    put_head(record, r.head);
    Json bonds = Json::array();
    for (const auto& bond : r.bonds) bonds.push_back(json_bond(table, bond));
    record.put("bonds", std::move(bonds));
    molecules.push_back(record.finish());
  }
  top["molecules"] = std::move(molecules);
  return dumped(top);
}

std::string steps_json(const Table& table, std::span<const StepsRecord> records,
                       std::span<const ReactionRecord> reactions) {
  const bool free_only = records.empty() && !reactions.empty();
  Json top = json_top(table, free_only ? "halostep.reactions/1" : "halostep.steps/1");
  Json molecules = Json::array();
  for (const auto& r : records) {
    JsonRecord record;
    put_head(record, r.head);
    Json steps = Json::array();
    for (const auto& step : r.steps) steps.push_back(json_step(table, step));
    record.put("steps", std::move(steps));
    molecules.push_back(record.finish());
  }
  top["molecules"] = std::move(molecules);
  Json asked = Json::array();
  for (const auto& reaction : reactions) asked.push_back(json_reaction(table, reaction));
  top["reactions"] = std::move(asked);
  return dumped(top);
}

std::string outcome_json(const Table& table, std::span<const OutcomeRecord> records) {
  Json top = json_top(table, "halostep.outcome/1");
  Json molecules = Json::array();
  for (const auto& r : records) {
    JsonRecord record;
    put_head(record, r.head);
    Json halogens = Json::array();
    for (const auto& outcome : r.halogens) halogens.push_back(json_halogen(table, outcome));
    record.put("halogens", std::move(halogens));
    if (r.comparison) {
      record.put("comparison", json_comparison(*r.comparison));
    } else {
      record.put_null("comparison", r.head.error ? error_line(*r.head.error) : "not asked for (--compare)");
    }
    molecules.push_back(record.finish());
  }
  top["molecules"] = std::move(molecules);
  top["cautions"] = caution_text();
  return dumped(top);
}

}  // namespace halostep
