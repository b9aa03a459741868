#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <map>

#include "halostep/structure.hpp"
#include "outcome/engine_impl.hpp"
#include "bonds/sources.hpp"

namespace halostep {
namespace {

constexpr const char* kNames[] = {"F", "Cl", "Br", "I"};
constexpr int kNumbers[] = {9, 17, 35, 53};

BondModel make_model(const Table& t) {
  std::array<const FittedModel*, 4> exchange{};
  for (std::size_t x = 0; x < 4; ++x) exchange[x] = find_model(t.models, std::string("exchange.") + kNames[x]);
  return BondModel(t, find_model(t.models, "bonds"), exchange);
}

}  // namespace

const char* halogen_name(Halogen x) noexcept { return kNames[static_cast<std::size_t>(x)]; }
int halogen_element(Halogen x) noexcept { return kNumbers[static_cast<std::size_t>(x)]; }

Result<Halogen> parse_halogen(std::string_view text) {
  for (const auto x : kAllHalogens) {
    if (text == halogen_name(x)) return x;
  }
  return Error{ErrorClass::usage, fmt::format("unknown halogen '{}'; known: F, Cl, Br, I", text), {}};
}

const char* route_name(Route r) noexcept {
  switch (r) {
    case Route::measured: return "measured";
    case Route::adjusted: return "adjusted";
    case Route::typed: return "typed";
  }
  return "typed";
}

const char* step_kind_name(StepKind k) noexcept {
  switch (k) {
    case StepKind::initiation: return "initiation";
    case StepKind::abstraction: return "abstraction";
    case StepKind::transfer: return "transfer";
    case StepKind::net: return "net";
    case StepKind::termination: return "termination";
    case StepKind::elementary: return "elementary";
  }
  return "elementary";
}

Engine::Impl::Impl(Table t)
    : table(std::move(t)), model(make_model(table)), bonds(table, model), thermo(table), steps(table, model, bonds, thermo),
      rates(table), rate_evidence(table), media(table), reversal(table, thermo) {}

Result<std::vector<BondAnswer>> Engine::Impl::bond_answers(const Analysis& a, const std::vector<SiteBond>& sites,
                                                               const BondOptions& o) const {
  auto list = bonds.all(a, sites, o);
  if (list.empty()) return Error{ErrorClass::domain, "no X-H, C-X or weak bond in this structure", {}};
  if (std::none_of(list.begin(), list.end(), [](const BondAnswer& b) { return b.d298.has_value(); })) {
    // A structure refused only for its isotopes says so.
    return list.front().why ? *list.front().why : Error{ErrorClass::domain, "no bond of this structure could be answered", {}};
  }
  return list;
}

std::vector<HalogenRates> Engine::Impl::halogen_rates(const Analysis& a, const CarbonSites& c, std::span<const Halogen> halogens,
                                                      double temperature, bool with_errors) const {
  std::vector<HalogenRates> out;
  out.reserve(halogens.size());
  for (const auto halogen : halogens) {
    const int x = static_cast<int>(halogen);
    HalogenRates r{halogen, std::nullopt};
    if (carrier(x) != nullptr) {
      r.rates = kind_rates(c, rates, model, bonds.adjusted(), x, *steps.halogen(x).d_hx, a.heavy_atoms(), temperature, with_errors);
    }
    out.push_back(std::move(r));
  }
  return out;
}

std::vector<StepAnswer> Engine::Impl::step_answers(const Analysis& a, const std::vector<SiteBond>& sites, const CarbonSites& c,
                                                   std::span<const HalogenRates> rated, double temperature,
                                                   const BondOptions& o) const {
  std::vector<Halogen> halogens;
  halogens.reserve(rated.size());
  for (const auto& r : rated) halogens.push_back(r.halogen);
  auto list = steps.chain(a, sites, halogens, temperature, o);
  // chain() gives the abstractions of one halogen after the other, each in the order of the sites.
  std::size_t n = 0, site = 0;
  std::map<std::pair<int, std::size_t>, std::vector<int>> behind;  // sources of rates by halogen and kind of C-H
  for (auto& s : list) {
    if (s.kind != StepKind::abstraction) continue;
    const auto& r = rated[n / sites.size()];
    const std::size_t any = n++ % sites.size();
    if (any == 0) site = 0;
    const bool carbon = a.original().atom(a.sites()[any].atom).element == element::C;
    if (carbon) ++site;
    if (!carbon) {
      if (o.details) s.why_ea = "the rate model covers C-H only";
    } else if (!r.rates) {
      if (o.details) s.why_ea = "the table holds no rate model for this halogen";
    } else if (c.sites[site - 1].kind < 0) {
      if (o.details) s.why_ea = c.sites[site - 1].refusal;
    } else {
      const int x = static_cast<int>(r.halogen);
      s.ea = Quantity{site_ea(c, *r.rates, *carrier(x), site - 1, temperature), 0};
      s.k_cm3_s = site_k(c, *r.rates, site - 1);
      if (!o.details) continue;
      s.ea->u = barrier_errors(c, rates, x, *steps.halogen(x).d_hx, site - 1, temperature).u_ea;
      s.u_log10_k_cm3_s = u_log10_k(*r.rates, c, site - 1);
      const auto kind = static_cast<std::size_t>(c.sites[site - 1].kind);
      const auto [known, fresh] = behind.try_emplace({x, kind});
      if (fresh) known->second = rate_evidence.sources(x, a.key(), {c.kinds[kind].rate.a_class});
      add_sources(s.sources, known->second);
    }
  }
  return list;
}

Result<Engine> Engine::open(const std::string& table_path) {
  auto t = open_table(table_path);
  if (!t.ok()) return t.error();
  return from_table(std::move(t).value());
}

Result<Engine> Engine::from_table(Table table) { return Engine(std::make_unique<const Impl>(std::move(table))); }

Engine::Engine(std::unique_ptr<const Impl> impl) : impl_(std::move(impl)) {}
Engine::Engine(Engine&&) noexcept = default;
Engine& Engine::operator=(Engine&&) noexcept = default;
Engine::~Engine() = default;

const Table& Engine::table() const noexcept { return impl_->table; }

Result<std::vector<BondAnswer>> Engine::bonds(const Molecule& m, const BondOptions& o) const {
  const Analysis a(m);
  return impl_->bond_answers(a, impl_->bonds.sites(a, o.typed), o);
}

Result<std::vector<StepAnswer>> Engine::steps(const Molecule& m, std::span<const Halogen> halogens, double temperature,
                                              const BondOptions& o) const {
  const Analysis a(m);
  const auto sites = impl_->bonds.sites(a, o.typed);
  const auto c = carbon_sites(a, sites, impl_->model);
  if (sites.empty()) return Error{ErrorClass::domain, "no X-H bond in this structure", {}};
  return impl_->step_answers(a, sites, c, impl_->halogen_rates(a, c, halogens, temperature, o.details), temperature, o);
}

Result<Medium> Engine::medium(std::string_view text) const { return impl_->media.parse(text); }

Result<StepAnswer> Engine::reaction(std::string_view text, double temperature) const {
  auto s = impl_->steps.reaction(text, temperature);
  if (s.ok()) impl_->add_rate(s.value(), text);
  return s;
}

Result<std::vector<HalogenOutcome>> Engine::outcome(const Molecule& m, std::span<const Halogen> halogens, double temperature,
                                                    const OutcomeOptions& o) const {
  const auto conditions = impl_->conditions(o);
  if (!conditions.ok()) return conditions.error();
  const Analysis a(m);
  const auto c = carbon_sites(a, impl_->bonds.sites(a, o.typed), impl_->model);
  return impl_->outcome_answers(a, c, impl_->halogen_rates(a, c, halogens, temperature, true), temperature, o.details,
                                conditions.value());
}

Result<Study> Engine::study(const Molecule& m, std::span<const Halogen> halogens, double temperature,
                            const BondOptions& o) const {
  const Analysis a(m);
  Study s;
  const auto sites = impl_->bonds.sites(a, o.typed);
  auto bonds = impl_->bond_answers(a, sites, o);
  if (!bonds.ok()) return bonds.error();
  s.bonds = std::move(bonds).value();
  const auto c = carbon_sites(a, sites, impl_->model);
  if (c.sites.empty()) return s;
  const auto rated = impl_->halogen_rates(a, c, halogens, temperature, true);
  s.steps = impl_->step_answers(a, sites, c, rated, temperature, o);
  auto outcome = impl_->outcome_answers(a, c, rated, temperature, o.details);
  if (outcome.ok()) s.halogens = std::move(outcome).value();
  return s;
}

}  // namespace halostep
