#include "tables/hammond.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <fstream>

#include "halostep/structure.hpp"

namespace halostep {
namespace {

constexpr double kTemperature = 400.15;  // where the classical scales of bromine stand

constexpr const char* kHydrocarbons[] = {
    "CCC",      "CCCC",       "CC(C)C",        "CCCCC",       "CCC(C)C",        "CC(C)C(C)C", "CCCCCC",   "CC(C)CCC",
    "CCC(C)CC", "CC(C)(C)CC", "CC(C)(C)C(C)C", "CC(C)CC(C)C", "CC(C)CC(C)(C)C", "CCCCCCC",    "CCCCCCCC", "CC1CCCCC1",
    "CC1CCCC1", "CCc1ccccc1", "CC(C)c1ccccc1", "CCCc1ccccc1", "C=CCC",          "CC=CCC"};
constexpr const char* kPolar[] = {"FC(F)(F)CCCC", "FCCCC",       "ClCCCC",  "CCCCl",    "CC(C)Cl", "FC(=O)CCCC",
                                  "ClC(=O)CCCC",  "COC(=O)CCCC", "N#CCCCC", "CCC(=O)O", "CCCC#N",  "CC(C)C(=O)Cl"};

/// One part of a selectivity by name.
struct Part {
  const char* name;
  double value;
};

/// The part that does most to turn the order the enthalpies set, or nothing where they are not turned.
std::string turned_by(const Selectivity& s) {
  const double per_h = s.ln_ratio - s.statistical;
  if (s.enthalpy * per_h >= 0) return "-";
  const Part parts[] = {{"polar", s.polar}, {"A factor", s.a_factor}, {"curvature", s.curvature}};
  const auto* most = std::max_element(std::begin(parts), std::end(parts),
                                      [&](const Part& a, const Part& b) { return a.value * per_h < b.value * per_h; });
  return most->name;
}

std::optional<HalogenOutcome> asked(const Engine& e, const char* smiles, Halogen x) {
  const auto m = parse_smiles(smiles);
  if (!m.ok()) return std::nullopt;
  const Halogen one[] = {x};
  auto o = e.outcome(m.value(), one, kTemperature);
  return o.ok() ? std::optional(std::move(o.value()[0])) : std::nullopt;
}

/// Fastest and slowest site by rate per H; as indices.
std::pair<std::size_t, std::size_t> extremes(const HalogenOutcome& h) {
  const auto per_h = [](const SiteOutcome& a, const SiteOutcome& b) {
    return a.k_cm3_s / a.h_count < b.k_cm3_s / b.h_count;
  };
  const auto [low, high] = std::minmax_element(h.sites.begin(), h.sites.end(), per_h);
  return {static_cast<std::size_t>(high - h.sites.begin()), static_cast<std::size_t>(low - h.sites.begin())};
}

/// Parts between two sites, from those of the largest site against each.
std::optional<Selectivity> between(const HalogenOutcome& h, std::size_t a, std::size_t b) {
  Selectivity sa, sb;
  for (const auto& s : h.selectivity) {
    if (s.b == static_cast<int>(a)) sa = s;
    if (s.b == static_cast<int>(b)) sb = s;
  }
  if (a == b) return std::nullopt;
  Selectivity out;
  out.a = static_cast<int>(a);
  out.b = static_cast<int>(b);
  for (double Selectivity::*part : {&Selectivity::ln_ratio, &Selectivity::enthalpy, &Selectivity::curvature,
                                    &Selectivity::polar, &Selectivity::statistical, &Selectivity::a_factor,
                                    &Selectivity::encounter, &Selectivity::medium, &Selectivity::reversal}) {
    out.*part = sb.*part - sa.*part;
  }
  return out;
}

std::string hydrocarbons(const Engine& e) {
  std::string out =
      "| substrate | faster > slower | difference of D | F: TS, enthalpy, total | Cl | Br | I | ordered "
      "|\n|---|---|---|---|---|---|---|---|\n";
  for (const char* smiles : kHydrocarbons) {
    // The pair is bromine's, the most selective with a wide base of rates; the same two sites for all four.
    const auto br = asked(e, smiles, Halogen::Br);
    if (!br || br->sites.size() < 2) continue;
    const auto [a, b] = extremes(*br);
    std::string cells;
    bool ordered = true;
    double last_position = -1, last_part = -1;
    for (const auto x : kAllHalogens) {
      const auto h = asked(e, smiles, x);
      if (!h) return out;
      const double position = 0.5 * (h->sites[a].ts_position + h->sites[b].ts_position);
      const double dd = h->sites[b].dh.value - h->sites[a].dh.value;
      // The enthalpy part of this pair: mean position times the difference.
      const double part = position * dd / (kGasConstant * kTemperature);
      const double total =
          std::log(h->sites[a].k_cm3_s / h->sites[a].h_count * h->sites[b].h_count / h->sites[b].k_cm3_s);
      cells += fmt::format(" {:.2f}, {:.2f}, {:.2f} |", position, part, total);
      ordered = ordered && position > last_position && part > last_part;
      last_position = position;
      last_part = part;
    }
    out += fmt::format("| {} | {} > {} | {:.1f} |{} {} |\n", smiles, br->sites[a].radical, br->sites[b].radical,
                       br->sites[b].dh.value - br->sites[a].dh.value, cells, ordered ? "yes" : "no");
  }
  return out;
}

std::string polar(const Engine& e) {
  std::string out =
      "| substrate | X | fastest > slowest per H | spread | enthalpy | curvature | polar | A factor | turned by "
      "|\n|---|---|---|---|---|---|---|---|---|\n";
  for (const char* smiles : kPolar) {
    for (const auto x : {Halogen::Cl, Halogen::Br}) {
      const auto h = asked(e, smiles, x);
      if (!h || h->sites.size() < 2) continue;
      const auto [a, b] = extremes(*h);
      const auto s = between(*h, a, b);
      if (!s) continue;
      out +=
          fmt::format("| {} | {} | {} > {} | {:.3g} | {:.2f} | {:.2f} | {:.2f} | {:.2f} | {} |\n", smiles,
                      halogen_name(x), h->sites[a].radical, h->sites[b].radical, std::exp(s->ln_ratio - s->statistical),
                      s->enthalpy, s->curvature, s->polar, s->a_factor, turned_by(*s));
    }
  }
  return out;
}

}  // namespace

std::string hammond_table(const Engine& engine) {
  return fmt::format(
             "# Selectivity and the position of the transition state\n\nWritten by `halostep-tables hammond` from the "
             "fitted models, at {:.2f} K. "
             "All figures are ln of a ratio per H. TS: mean position of the two transition states, 0 like the "
             "reactants, 1 like the products "
             "(Hammond, J. Am. Chem. Soc. 1955, 77, 334). The answers screen; they do not replace measurements.\n\n"
             "## Hydrocarbons\n\nOne pair of sites for all four halogens. The enthalpy part is TS times the difference "
             "of D over RT; `ordered` says "
             "that TS and enthalpy part both rise from F to I.\n\n",
             kTemperature) +
         hydrocarbons(engine) +
         "\n## Polar substrates\n\nThe fastest against the slowest site per H. The parts and the rest (encounter, "
         "medium, reversal: 0 here) multiply to "
         "the spread. Where the enthalpies alone would put the sites the other way round, the last column names the "
         "part that turns the order. "
         "Measured spreads of 1,1,1-trifluoropentane: 107 for Cl at 348 K, 90 for Br at 423 K (Singh & Tedder, J. "
         "Chem. Soc. 1964, 4737, from "
         "memory).\n\n" +
         polar(engine);
}

int hammond(Table table, const std::string& markdown) {
  const auto engine = Engine::from_table(std::move(table));
  if (!engine.ok()) {
    fmt::print(stderr, "{}\n", engine.error().message);
    return 1;
  }
  const auto text = hammond_table(engine.value());
  fmt::print("{}", text);
  if (markdown.empty()) return 0;
  std::ofstream out(markdown, std::ios::binary);
  out << text;
  out.close();
  if (out) return 0;
  fmt::print(stderr, "{}:0: cannot be written\n", markdown);
  return 1;
}

}  // namespace halostep
