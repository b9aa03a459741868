#include "json_answers.hpp"

#include <cmath>

namespace halostep {

namespace {

constexpr int kEnergyDigits = 9;  // more than any u needs: sums of steps still close
constexpr int kRateDigits = 6;

std::optional<double> value_of(const std::optional<Quantity>& q) { return q ? std::optional(q->value) : std::nullopt; }
std::optional<double> u_of(const std::optional<Quantity>& q) { return q ? std::optional(q->u) : std::nullopt; }

/// Ratio of two rate coefficients; null where it exceeds what a double holds.
std::optional<double> ratio_of(double ln_ratio) {
  return ln_ratio < 700 ? std::optional(std::exp(ln_ratio)) : std::nullopt;
}

Json json_contribution(const Contribution& c) {
  JsonRecord record;
  record.put("name", c.name);
  record.put_number("count", c.count, kEnergyDigits);
  record.put_number("value_kj_mol", c.value.value, kEnergyDigits);
  record.put_number("u_kj_mol", c.value.u, kEnergyDigits);
  record.put("support", c.support);
  return record.finish();
}

Json json_site(const SiteOutcome& site) {
  JsonRecord record;
  record.put_text("radical", site.radical, "text fields were not asked for");
  record.put("h_count", site.h_count);
  record.put_text("type", site.type, "text fields were not asked for");
  record.put("atom", site.atom);
  record.put("atoms", site.atoms);
  record.put_number("dh_kj_mol", site.dh.value, kEnergyDigits);
  record.put_number("u_dh_kj_mol", site.dh.u, kEnergyDigits);
  record.put_number("k_cm3_s", site.k_cm3_s, kRateDigits);
  record.put_number("u_log10_k", site.u_log10_k, kRateDigits);
  record.put_number("ea_kj_mol", site.ea, kEnergyDigits);
  record.put_number("u_ea_kj_mol", site.u_ea, kEnergyDigits);
  record.put_number("a_cm3_s", site.a_cm3_s, kRateDigits);
  record.put_number("ts_position", site.ts_position, kRateDigits);
  record.put_number("u_ts_position", site.u_ts_position, kRateDigits);
  record.put_number("share", site.share, 15);
  record.put_number("share_low", site.share_low, 15);
  record.put_number("share_high", site.share_high, 15);
  record.put_number("complexed_fraction", site.complexed, kRateDigits);
  record.put_number("forward_fraction", site.forward, kRateDigits, site.why_forward);
  record.put("extrapolated", site.extrapolated);
  if (site.extrapolated) record.add_reason("extrapolated", site.why_extrapolated);
  return record.finish();
}

Json json_selectivity(const HalogenOutcome& outcome, const Selectivity& s) {
  JsonRecord record;
  record.put("a_radical", outcome.sites[static_cast<std::size_t>(s.a)].radical);
  record.put("b_radical", outcome.sites[static_cast<std::size_t>(s.b)].radical);
  record.put_number("ratio", ratio_of(s.ln_ratio), kRateDigits, "larger than a number can hold");
  record.put_number("ln_ratio", s.ln_ratio, kEnergyDigits);
  record.put_number("enthalpy", s.enthalpy, kEnergyDigits);
  record.put_number("curvature", s.curvature, kEnergyDigits);
  record.put_number("polar", s.polar, kEnergyDigits);
  record.put_number("statistical", s.statistical, kEnergyDigits);
  record.put_number("a_factor", s.a_factor, kEnergyDigits);
  record.put_number("encounter", s.encounter, kEnergyDigits);
  record.put_number("medium", s.medium, kEnergyDigits);
  record.put_number("reversal", s.reversal, kEnergyDigits);
  return record.finish();
}

}  // namespace

Json json_bond(const Table& table, const BondAnswer& bond) {
  const std::string reason = bond.why ? error_line(*bond.why) : std::string("no value");
  JsonRecord record;
  record.put("bond", bond.bond);
  record.put_text("radical", bond.radical, bond.why ? reason : "text fields were not asked for");
  record.put("h_count", bond.h_count);
  record.put("bond_count", bond.bond_count);
  record.put_text("type", bond.type, bond.why ? reason : "text fields were not asked for");
  record.put("atom", bond.atom);
  if (bond.partner >= 0) {
    record.put("partner", bond.partner);
  } else {
    record.put_null("partner", "the other atom is an ordinary hydrogen, which has no number");
  }
  record.put("atoms", bond.atoms);
  record.put_number("d298_kj_mol", value_of(bond.d298), kEnergyDigits, reason);
  record.put_number("u_kj_mol", u_of(bond.d298), kEnergyDigits, reason);
  if (bond.d298) {
    record.put("route", route_name(bond.route));
    if (bond.why) record.add_reason("d298_kj_mol", reason);
  } else {
    record.put_null("route", reason);
  }
  record.put("extrapolated", bond.extrapolated);
  record.put("sources", json_sources(table, bond.sources));
  Json contributions = Json::array();
  for (const auto& c : bond.contributions) contributions.push_back(json_contribution(c));
  record.put("contributions", std::move(contributions));
  return record.finish();
}

Json json_step(const Table& table, const StepAnswer& step) {
  const bool abstraction = step.kind == StepKind::abstraction;
  const std::string no_dh = step.why_dh.empty() ? "not known" : step.why_dh;
  const std::string no_ds = step.why_ds.empty() ? "the table lacks S or Cp of a species of this step" : step.why_ds;
  const std::string no_ea =
      !step.why_ea.empty() ? step.why_ea : (abstraction ? "no rate model" : "barriers are given for abstraction only");
  JsonRecord record;
  if (step.halogen) {
    record.put("halogen", halogen_name(*step.halogen));
  } else {
    record.put_null("halogen", "a free query: no halogen is meant");
  }
  record.put("kind", step_kind_name(step.kind));
  record.put("reaction", step.reaction);
  record.put("balanced", step.balanced);
  record.put_text("radical", step.radical, "no single site is meant");
  record.put_number("temperature_k", step.temperature, kEnergyDigits);
  record.put_number("dh_kj_mol", value_of(step.dh), kEnergyDigits, no_dh);
  record.put_number("u_kj_mol", u_of(step.dh), kEnergyDigits, no_dh);
  const auto pair = [&](const char* key, const char* u_key, const std::optional<Quantity>& q, const std::string& why) {
    record.put_number(key, value_of(q), kEnergyDigits, why);
    record.put_number(u_key, u_of(q), kEnergyDigits, why);
  };
  pair("ds_j_mol_k", "u_ds_j_mol_k", step.ds, no_ds);
  pair("dg_kj_mol", "u_dg_kj_mol", step.dg, step.dh ? no_ds : no_dh);
  pair("log10_k", "u_log10_k", step.log10_k, step.dh ? no_ds : no_dh);
  pair("ea_kj_mol", "u_ea_kj_mol", step.ea, no_ea);
  record.put_number("k_cm3_s", step.k_cm3_s, kRateDigits, no_ea);
  record.put_number("u_log10_k_cm3_s", step.k_cm3_s ? std::optional(step.u_log10_k_cm3_s) : std::nullopt, kRateDigits, no_ea);
  record.put_text("route", step.route, no_dh);
  record.put("sources", json_sources(table, step.sources));
  return record.finish();
}

Json json_halogen(const Table& table, const HalogenOutcome& outcome) {
  JsonRecord record;
  record.put("halogen", halogen_name(outcome.halogen));
  record.put_number("temperature_k", outcome.temperature, kEnergyDigits);
  record.put_number("k_total_cm3_s", outcome.k_total, kRateDigits);
  if (outcome.slope) {
    record.put("slope", {{"value", rounded(outcome.slope->value, kRateDigits)},
                         {"u", rounded(outcome.slope->u, kRateDigits)},
                         {"over", outcome.slope_over}});
  } else {
    record.put_null("slope", "fewer than three measured activation energies");
  }
  record.put("medium", outcome.medium);
  record.put_number("conversion", outcome.conversion, kRateDigits);
  record.put_number("hx_per_x2", outcome.hx_per_x2, kRateDigits);
  record.put("notes", outcome.notes);
  Json sites = Json::array();
  for (const auto& site : outcome.sites) sites.push_back(json_site(site));
  record.put("sites", std::move(sites));
  Json pairs = Json::array();
  for (const auto& pair : outcome.selectivity) pairs.push_back(json_selectivity(outcome, pair));
  record.put("selectivity", std::move(pairs));
  record.put("sources", json_sources(table, outcome.sources));
  return record.finish();
}

Json json_comparison(const Comparison& comparison) {
  Json rows = Json::array();
  for (const auto& row : comparison.rows) {
    JsonRecord r;
    r.put("halogen", halogen_name(row.halogen));
    r.put_number("temperature_k", row.temperature, kEnergyDigits);
    r.put_number("share", row.share, 15);
    r.put_number("share_low", row.share_low, 15);
    r.put_number("share_high", row.share_high, 15);
    r.put_number("k_cm3_s", row.k_cm3_s, kRateDigits);
    r.put_number("dh_abstraction_kj_mol", value_of(row.dh_abstraction), kEnergyDigits, "the step has no enthalpy");
    r.put_number("dh_net_kj_mol", value_of(row.dh_net), kEnergyDigits, "D of the new C-X bond is not known");
    r.put("propagates", row.propagates);
    r.put("hazardous", row.hazardous);
    r.put("slow", row.slow);
    r.put("extrapolated", row.extrapolated);
    r.put("verdict", row.verdict);
    rows.push_back(r.finish());
  }
  JsonRecord record;
  record.put("wanted_radical", comparison.wanted);
  record.put("chosen_by", comparison.chosen_by);
  record.put("h_count", comparison.h_count);
  record.put("rows", std::move(rows));
  if (comparison.best >= 0) {
    const auto& best = comparison.rows[static_cast<std::size_t>(comparison.best)];
    record.put("best", {{"halogen", halogen_name(best.halogen)}, {"temperature_k", rounded(best.temperature, 9)}});
  } else {
    record.put_null("best", comparison.why);
  }
  record.put("reason", comparison.why);
  return record.finish();
}

}  // namespace halostep
