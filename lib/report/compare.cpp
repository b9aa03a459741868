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
/// Selective: also the lower end of the 95 % range of the share reaches this.
constexpr double kSelectiveShare = 0.9;

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

/// What the enthalpies say about the chain; its length was not computed.
std::string chain_text(const CompareRow& row) {
  const bool uphill = row.dh_abstraction && row.dh_abstraction->value > kAbstractionLimit;
  if (!row.propagates && uphill) return "no chain: abstraction " + signed_energy(row.dh_abstraction->value);
  if (!row.propagates) return "no chain: net " + signed_energy(row.dh_net->value);
  if (!row.dh_net) return "abstraction allowed by enthalpy, net not known";
  return "enthalpy allows a chain";
}

std::string wait_text(const CompareRow& row) {
  return row.k_cm3_s > 0 ? format_scientific(kSlowLimit / row.k_cm3_s, 2) + " s" : "no time that a number holds";
}

/// What speaks against a row that may carry a chain, and how far to trust it.
std::vector<std::string> cautions_of(const CompareRow& row) {
  std::vector<std::string> parts;
  if (row.hazardous) {
    parts.push_back("one turn releases " + format_fixed(-row.dh_net->value, 0) +
                    " kJ/mol, about a C-C bond or more: fragmentation, fire");
  }
  if (row.slow) parts.push_back("slow: at 1 mol/L an atom needs " + wait_text(row) + " for this site");
  if (row.extrapolated) parts.push_back("outside the evidence");
  return parts;
}

std::string verdict_of(const CompareRow& row) {
  std::vector<std::string> parts{chain_text(row)};
  if (row.only_site) {
    parts.push_back("only C-H site");
  } else if (row.only_rated) {
    parts.push_back("only C-H site with a rate");
  } else if (row.share_low >= kSelectiveShare) {
    parts.push_back("selective");
  } else if (row.share < 0.5) {
    parts.push_back("less than half at the wanted site");
  }
  for (auto& part : cautions_of(row)) parts.push_back(std::move(part));
  return fmt::format("{}", fmt::join(parts, "; "));
}

CompareRow make_row(const HalogenOutcome& outcome, const SiteOutcome& site, std::span<const StepAnswer> steps) {
  CompareRow row;
  row.halogen = outcome.halogen;
  row.temperature = outcome.temperature;
  row.share = site.share;
  row.share_low = site.share_low;
  row.share_high = site.share_high;
  row.only_site = outcome.sites.size() == 1 && outcome.refused.empty();
  row.only_rated = outcome.sites.size() == 1 && !outcome.refused.empty();
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

std::string share_text(const CompareRow& row) {
  if (row.only_site) return "the wanted site is the only C-H site";
  if (row.only_rated) return "the wanted site is the only C-H site with a rate (the others are outside the domain)";
  return fmt::format("{} % of the attack goes to the wanted site (95 % range {} to {} %)", percent(row.share),
                     percent(row.share_low), percent(row.share_high));
}

std::string next_text(const Comparison& c, const CompareRow& best) {
  const CompareRow* next = nullptr;  // the best of another halogen
  for (const auto& row : c.rows) {
    if (row.halogen != best.halogen && (next == nullptr || better(row, *next))) next = &row;
  }
  if (next == nullptr) return {};
  if (!next->propagates) return "; by enthalpy no other halogen asked for carries a chain";
  return fmt::format("; next is {} with {} % ({})", name_of(*next), percent(next->share), next->verdict);
}

std::string reason_for(const Comparison& c) {
  const auto& best = c.rows[static_cast<std::size_t>(c.best)];
  std::string out = fmt::format("{}: {}; {}", name_of(best), chain_text(best), share_text(best));
  if (best.dh_net) out += ", net " + signed_energy(best.dh_net->value) + " per turn";
  if (const auto cautions = cautions_of(best); !cautions.empty()) {
    out += fmt::format("; but {}", fmt::join(cautions, "; "));
  }
  return out + next_text(c, best);
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
    c.why = only ? fmt::format("none: by enthalpy {} carries no chain here ({})", halogen_name(*only), best->verdict)
                 : fmt::format("none: by enthalpy no halogen asked for carries a chain here ({})", best->verdict);
  }
  return c;
}

}  // namespace halostep
