// One wanted site against halogens and temperatures: what speaks for each, and which to choose.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "halostep/report.hpp"
#include "phrases.hpp"

namespace halostep {

namespace {

/// k at which an atom finds 1 mol/L of substrate once a second, cm3 molecule-1 s-1.
constexpr double kSlowLimit = 1000.0 / kAvogadro;
/// Shares closer than this are called equal, and the faster choice is taken.
constexpr double kShareTie = 0.005;

std::string signed_energy(double kj_mol) {
  return fmt::format("{}{} kJ/mol", kj_mol > 0 ? "+" : "", format_fixed(kj_mol, 0));
}

const StepAnswer* find_step(std::span<const StepAnswer> steps, Halogen x, StepKind kind, const std::string& radical) {
  const StepAnswer* any = nullptr;
  for (const auto& step : steps) {
    if (step.halogen != x || step.kind != kind) continue;
    if (step.radical == radical) return &step;
    if (step.radical.empty() && any == nullptr) any = &step;
  }
  return any;
}

std::string verdict_of(const CompareRow& row) {
  std::vector<std::string> parts;
  if (!row.propagates) {
    if (row.dh_abstraction && row.dh_abstraction->value > kAbstractionLimit) {
      parts.push_back("no chain: abstraction " + signed_energy(row.dh_abstraction->value));
    } else {
      parts.push_back("no chain: net " + signed_energy(row.dh_net->value));
    }
  }
  if (row.hazardous) {
    parts.push_back("one turn releases " + format_fixed(-row.dh_net->value, 0) +
                    " kJ/mol, about a C-C bond or more: fragmentation, fire");
  }
  if (row.slow) parts.push_back("slow: an atom waits over 1 s at 1 mol/L");
  if (row.share < 0.5) parts.push_back("less than half at the wanted site");
  if (row.extrapolated) parts.push_back("outside the evidence");
  if (parts.empty()) parts.push_back(row.share >= 0.95 ? "selective, chain runs" : "chain runs");
  return fmt::format("{}", fmt::join(parts, "; "));
}

CompareRow make_row(const HalogenOutcome& outcome, const SiteOutcome& site, std::span<const StepAnswer> steps) {
  CompareRow row;
  row.halogen = outcome.halogen;
  row.temperature = outcome.temperature;
  row.share = site.share;
  row.share_low = site.share_low;
  row.share_high = site.share_high;
  row.k_cm3_s = site.k_cm3_s;
  row.dh_abstraction = site.dh;
  row.extrapolated = site.extrapolated;
  if (const auto* net = find_step(steps, outcome.halogen, StepKind::net, site.radical)) row.dh_net = net->dh;
  row.propagates = site.dh.value <= kAbstractionLimit && (!row.dh_net || row.dh_net->value <= 0);
  row.hazardous = row.dh_net && -row.dh_net->value > kChainHeatLimit;
  row.slow = site.k_cm3_s < kSlowLimit;
  row.verdict = verdict_of(row);
  return row;
}

/// Lower is better: chains that run, then without the heat of fluorine, then not slow.
int rank(const CompareRow& row) { return (row.propagates ? 0 : 4) + (row.hazardous ? 2 : 0) + (row.slow ? 1 : 0); }

bool better(const CompareRow& a, const CompareRow& b) {
  if (rank(a) != rank(b)) return rank(a) < rank(b);
  if (std::abs(a.share - b.share) > kShareTie) return a.share > b.share;
  return a.k_cm3_s > b.k_cm3_s;
}

std::string name_of(const CompareRow& row) {
  return fmt::format("{} at {} K", halogen_name(row.halogen), format_fixed(row.temperature, 2));
}

std::string reason_for(const Comparison& c) {
  const auto& best = c.rows[static_cast<std::size_t>(c.best)];
  std::string out = fmt::format("{}: {} % of the attack goes to the wanted site (95 % range {} to {} %)", name_of(best),
                                percent(best.share), percent(best.share_low), percent(best.share_high));
  if (best.dh_net) out += ", net " + signed_energy(best.dh_net->value) + " per turn";
  const CompareRow* next = nullptr;  // the best of another halogen
  for (const auto& row : c.rows) {
    if (row.halogen != best.halogen && (next == nullptr || better(row, *next))) next = &row;
  }
  if (next != nullptr && !next->propagates) {
    out += "; no other halogen asked for carries a chain";
  } else if (next != nullptr) {
    out += fmt::format("; next is {} with {} % ({})", name_of(*next), percent(next->share), next->verdict);
  }
  return out;
}

}  // namespace

Result<Comparison> compare_site(std::span<const HalogenOutcome> outcomes, std::span<const StepAnswer> steps, int atom,
                                std::string chosen_by, std::optional<Halogen> only) {
  Comparison c;
  c.chosen_by = std::move(chosen_by);
  for (const auto& outcome : outcomes) {
    for (const auto& site : outcome.sites) {
      if (std::find(site.atoms.begin(), site.atoms.end(), atom) == site.atoms.end() && site.atom != atom) continue;
      c.wanted = site.radical;
      c.h_count = site.h_count;
      c.rows.push_back(make_row(outcome, site, steps));
      break;
    }
  }
  if (c.rows.empty()) {
    return Error{ErrorClass::domain, "the wanted site has no rate coefficient for any halogen asked for", "--compare"};
  }
  const CompareRow* best = nullptr;
  for (const auto& row : c.rows) {
    if ((!only || row.halogen == *only) && (best == nullptr || better(row, *best))) best = &row;
  }
  if (best == nullptr) {
    c.why = fmt::format("none: the product holds {}, which was not asked for", halogen_name(*only));
  } else if (best->propagates) {
    c.best = static_cast<int>(best - c.rows.data());
    c.why = reason_for(c);
  } else {
    c.why = only ? fmt::format("none: {} carries no chain here ({})", halogen_name(*only), best->verdict)
                 : fmt::format("none: no halogen asked for carries a chain here ({})", best->verdict);
  }
  return c;
}

}  // namespace halostep
