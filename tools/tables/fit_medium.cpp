#include "tables/fit_medium.hpp"

#include <algorithm>
#include <cmath>
#include <map>

#include "adjust/nonlinear.hpp"
#include "halostep/structure.hpp"
#include "tables/fit_bonds.hpp"

namespace halostep {
namespace {

constexpr int kChlorine = static_cast<int>(Halogen::Cl);
constexpr std::size_t kOwnRows = 3;
constexpr const char* kReference = "benzene";  // solvents with fewer rows lean on it

struct Pure {
  const char* name;
  double molarity;
};

// mol/L of the pure liquids at 25 C: densities and molar masses of handbooks, from memory; naphthalene as a solute of
// its liquid volume.
constexpr Pure kPure[] = {
    {"CS2", 16.6},          {"anisole", 9.2},           {"benzene", 11.2},        {"benzoyl chloride", 8.6},
    {"chlorobenzene", 9.8}, {"di-n-butyl ether", 5.9},  {"dioxane", 11.7},        {"fluorobenzene", 10.6},
    {"iodobenzene", 8.9},   {"m-xylene", 8.1},          {"methyl acetate", 12.5}, {"naphthalene", 8.0},
    {"nitrobenzene", 9.7},  {"nitromethane", 18.5},     {"propionitrile", 14.1},  {"tert-butylbenzene", 6.4},
    {"toluene", 9.4},       {"trichloroethylene", 11.1}};

double pure_molarity(const std::string& solvent) {
  const auto* it = std::find_if(std::begin(kPure), std::end(kPure), [&](const Pure& p) { return solvent == p.name; });
  return it == std::end(kPure) ? 0.0 : it->molarity;
}

// Kind of the site whose radical this is, or -1.
int kind_of(const Analysis& a, const CarbonSites& c, const std::string& radical) {
  const auto r = parse_smiles(radical, ParseMode::species);
  if (!r.ok()) return -1;
  const int atom = find_site(a.original(), a.classes(), r.value());
  const auto it =
      std::find_if(c.sites.begin(), c.sites.end(), [&](const CarbonSite& q) { return q.site->atom == atom; });
  return it == c.sites.end() ? -1 : it->kind;
}

bool speaks(const RelativeRateRow& r) {
  return !r.superseded && r.reagent == "Cl2" && r.molecule == r.reference_molecule && r.ratio > 0;
}

}  // namespace

std::vector<MediumSample> medium_samples(const Engine::Impl& impl) {
  std::vector<MediumSample> out;
  if (impl.carrier(kChlorine) == nullptr) return out;
  for (std::size_t i = 0; i < impl.table.relative_rates.size(); ++i) {
    const auto& r = impl.table.relative_rates[i];
    const auto medium = split_medium(r.medium);
    if (!speaks(r) || !medium.ok() || !(medium.value().molarity > 0) || MediumBook::inert(medium.value().solvent))
      continue;
    auto m = parse_smiles(r.molecule);
    if (!m.ok()) continue;
    MediumSample s;
    s.molecule = std::make_shared<const Molecule>(std::move(m).value());
    const auto a = std::make_shared<const Analysis>(*s.molecule);
    const auto c = std::make_shared<const CarbonSites>(carbon_sites(*a, impl.bonds.sites(*a, false), impl.model));
    const int kind = kind_of(*a, *c, r.radical), reference = kind_of(*a, *c, r.reference_radical);
    s.pure = pure_molarity(medium.value().solvent);
    if (kind < 0 || reference < 0 || !(s.pure > 0)) continue;
    s.solvent = medium.value().solvent;
    s.molarity = medium.value().molarity;
    s.temperature = r.t;
    s.ln_value = std::log(r.ratio);
    s.u = std::log(10.0) * r.u_log10;
    s.row = static_cast<int>(i);
    s.sites = c;
    s.analysis = a;
    s.kind = static_cast<std::size_t>(kind);
    s.reference = static_cast<std::size_t>(reference);
    out.push_back(std::move(s));
  }
  return out;
}

double medium_ln_ratio(const Engine::Impl& impl, const MediumSample& s, const std::array<double, mp::total>& p) {
  const auto& d_hx = *impl.steps.halogen(kChlorine).d_hx;
  const auto& m = *impl.carrier(kChlorine);
  const int heavy = s.analysis->heavy_atoms();
  const auto free =
      kind_rates(*s.sites, impl.rates, impl.model, impl.bonds.adjusted(), kChlorine, d_hx, heavy, s.temperature, false);
  const auto e = medium_effect(*s.sites, free, m, d_hx.value, p, s.molarity,
                               substrate_molarity(heavy, s.molarity, s.pure), s.temperature);
  return free.at[s.kind].ln_k - free.at[s.reference].ln_k + e.ln_factor[s.kind] - e.ln_factor[s.reference];
}

Result<FittedModel> fit_solvent(const Engine::Impl& impl, std::span<const MediumSample> samples,
                                const FittedModel* like) {
  NonlinearProblem p;
  const auto n = static_cast<Eigen::Index>(samples.size());
  p.u.resize(n);
  double low = 1e9, high = 0;
  for (Eigen::Index i = 0; i < n; ++i) {
    const auto& s = samples[static_cast<std::size_t>(i)];
    p.u[i] = s.u;
    low = std::min(low, s.temperature);
    high = std::max(high, s.temperature);
  }
  // Cl. + benzene is bound by about 20 kJ/mol and formed at the encounter rate (Bunce, Ingold et al., J. Am. Chem. Soc.
  // 1985, 107, 5464, from memory); the priors are wide.
  p.start = Eigen::Vector3d(20.0, 2.0, std::log(5e-10));
  p.prior = Eigen::Vector3d(10.0, 3.0, 1.0);
  if (like != nullptr) {
    // One row tells K; that the solvent hardly complexes is what it has to speak against.
    p.start = Eigen::Vector3d(like->values[mp::binding], -2.0, like->values[mp::ln_trap]);
    p.prior = Eigen::Vector3d(3.0, 4.0, 1.0);
  }
  p.residual = [&](const Eigen::VectorXd& b) {
    Eigen::VectorXd r(n);
    for (Eigen::Index i = 0; i < n; ++i) {
      const auto& s = samples[static_cast<std::size_t>(i)];
      r[i] = s.ln_value - medium_ln_ratio(impl, s, {b[0], b[1], b[2]});
    }
    return r;
  };
  auto s = solve_nonlinear(p);
  if (!s.ok()) return s.error();
  const auto& first = samples.front();
  return pack_model(kMediumPrefix + first.solvent,
                    {"binding energy, kJ/mol", "ln K at 298.15 K, L/mol", "ln rate coefficient of complexing"},
                    s.value().b, s.value().covariance, std::vector<int>(mp::total, static_cast<int>(n)),
                    {{"scatter", s.value().scatter},
                     {"rows", static_cast<double>(n)},
                     {kPureSetting, first.pure},
                     {"T low", low},
                     {"T high", high}});
}

Result<std::vector<FittedModel>> fit_media(const Table& table) {
  const Engine::Impl impl(table);
  std::map<std::string, std::vector<MediumSample>> by_solvent;
  for (auto& s : medium_samples(impl)) by_solvent[s.solvent].push_back(std::move(s));
  std::map<std::string, FittedModel> done;
  for (const bool many : {true, false}) {
    for (const auto& [solvent, rows] : by_solvent) {
      if ((rows.size() >= kOwnRows) != many) continue;
      const auto like = done.find(kReference);
      auto m = fit_solvent(impl, rows, many || like == done.end() ? nullptr : &like->second);
      if (!m.ok()) return m.error();
      done.emplace(solvent, std::move(m).value());
    }
  }
  std::vector<FittedModel> out;
  for (auto& [solvent, m] : done) out.push_back(std::move(m));
  return out;
}

}  // namespace halostep
