#include "steps.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "halostep/structure.hpp"

namespace halostep {
namespace {

constexpr const char* kAtom[] = {"[F]", "[Cl]", "[Br]", "[I]"};
constexpr const char* kHydride[] = {"F", "Cl", "Br", "I"};
constexpr const char* kMolecule[] = {"FF", "ClCl", "BrBr", "II"};
constexpr int kNumber[] = {9, 17, 35, 53};

std::string canonical_of(const char* smiles) {
  const auto m = parse_smiles(smiles, ParseMode::species);
  return m.ok() ? canonical_smiles(m.value(), false) : std::string(smiles);
}

void merge(std::vector<int>& into, const std::vector<int>& more) {
  for (const int s : more) {
    if (std::find(into.begin(), into.end(), s) == into.end()) into.push_back(s);
  }
}

Quantity minus(const Quantity& a, const Quantity& b) { return {a.value - b.value, std::hypot(a.u, b.u)}; }

}  // namespace

void finish(StepAnswer& s, const ThermoSum& sum, double temperature) {
  s.temperature = temperature;
  if (!sum.s_known) {
    s.why_ds = fmt::format("no entropy in the table for {}", sum.missing);
    return;
  }
  const double dcp = sum.cp_known ? sum.cp : 0.0;
  s.ds = sum.s + dcp * std::log(temperature / kReferenceTemperature);
  if (!s.dh) return;
  const double dh = s.dh->value + dcp * (temperature - kReferenceTemperature) / 1000.0;
  s.dg = dh - temperature * *s.ds / 1000.0;
  s.log10_k = -*s.dg / (kGasConstant * temperature * std::log(10.0));
}

// What the steps of one site share, worked out once for all halogens.
struct StepBook::SiteData {
  const HydrogenSite* site = nullptr;
  const BondValue* d = nullptr;
  const SiteBond* bond = nullptr;
  std::string rh, radical;                 // texts
  std::vector<int> sources;                // of d
  const SpeciesEntry *rh_entry = nullptr, *r_entry = nullptr, *rr_entry = nullptr;
  std::string dimer;
  std::optional<Quantity> d_rr;
};

StepBook::StepBook(const Table& table, const BondModel& model, const BondBook& bonds, const ThermoBook& thermo)
    : table_(table), model_(model), bonds_(bonds), thermo_(thermo), halogens_(4) {
  for (std::size_t x = 0; x < 4; ++x) {
    auto& h = halogens_[x];
    const auto hx = canonical_of(kHydride[x]), xx = canonical_of(kMolecule[x]);
    h.entry_hx = model_.measured(hx, kAtom[x], "[H]");
    h.entry_xx = model_.measured(xx, kAtom[x], kAtom[x]);
    if (h.entry_hx >= 0) h.d_hx = table.bonds[static_cast<std::size_t>(h.entry_hx)].d298;
    if (h.entry_xx >= 0) h.d_xx = table.bonds[static_cast<std::size_t>(h.entry_xx)].d298;
    h.atom = thermo.find(kAtom[x]);
    h.molecule = thermo.find(xx);
    h.hydride = thermo.find(hx);
  }
}

void StepBook::initiation(int x, double t, bool details, std::vector<StepAnswer>& out) const {
  const auto& h = halogens_[static_cast<std::size_t>(x)];
  StepAnswer s;
  s.halogen = static_cast<Halogen>(x);
  s.kind = StepKind::initiation;
  s.dh = h.d_xx;
  s.route = "bonds";
  if (details) {
    s.reaction = fmt::format("{}>>{}.{}", kMolecule[x], kAtom[x], kAtom[x]);
    if (h.entry_xx >= 0) s.sources = bonds_.entry_sources(h.entry_xx);
    if (!s.dh) s.why_dh = "the table has no D of the halogen";
    s.why_ea = "unimolecular dissociation; its rate is not modelled here";
  }
  ThermoSum sum;
  thermo_.add(sum, h.molecule, -1, kMolecule[x]);
  thermo_.add(sum, h.atom, 2, kAtom[x]);
  finish(s, sum, t);
  out.push_back(std::move(s));
}

void StepBook::site_steps(const Analysis& a, const SiteData& d, int x, double t, const BondOptions& o,
                          std::vector<StepAnswer>& out) const {
  const auto& h = halogens_[static_cast<std::size_t>(x)];
  // chain() has reserved room, so the three stay where they are.
  const std::size_t at = out.size();
  out.resize(at + 3);
  StepAnswer &abstraction = out[at], &transfer = out[at + 1], &net = out[at + 2];
  abstraction.kind = StepKind::abstraction;
  transfer.kind = StepKind::transfer;
  net.kind = StepKind::net;
  for (auto* s : {&abstraction, &transfer, &net}) {
    s->halogen = static_cast<Halogen>(x);
    s->route = "bonds";
    s->radical = d.radical;
  }
  const Quantity& delta = d.bond->delta[static_cast<std::size_t>(x)];
  const auto rx = bonds_.halide(a, *d.site, x, *d.d, delta, o.typed);
  if (d.d->d && h.d_hx) abstraction.dh = minus(*d.d->d, *h.d_hx);
  if (rx.d && h.d_xx) transfer.dh = minus(*h.d_xx, *rx.d);
  if (abstraction.dh && transfer.dh) {
    // The two bonds share the radical: with D(R-X) typed from D(R-H), D(R-H) cancels and only the exchange's u is left.
    const double pair = rx.route == Route::typed ? delta.u : std::hypot(d.d->d->u, rx.d->u);
    net.dh = Quantity{abstraction.dh->value + transfer.dh->value, std::hypot(pair, h.d_hx->u, h.d_xx->u)};
  }
  const SpeciesEntry* rx_entry = nullptr;
  std::string rx_text;
  if (o.details) {
    const auto halide = a.original().with_substituent(d.site->atom, kNumber[x]);
    rx_text = canonical_smiles(halide);
    rx_entry = thermo_.find(a.deuterium_count() == 0 ? canonical_smiles(halide, false) : std::string());
    abstraction.reaction = fmt::format("{}.{}>>{}.{}", kAtom[x], d.rh, kHydride[x], d.radical);
    transfer.reaction = fmt::format("{}.{}>>{}.{}", d.radical, kMolecule[x], rx_text, kAtom[x]);
    net.reaction = fmt::format("{}.{}>>{}.{}", d.rh, kMolecule[x], rx_text, kHydride[x]);
    if (!abstraction.dh) abstraction.why_dh = d.d->refusal.empty() ? "the table has no D(H-X)" : d.d->refusal;
    if (!transfer.dh) transfer.why_dh = rx.refusal.empty() ? "the table has no D(X-X)" : rx.refusal;
    if (!net.dh) net.why_dh = "a step of it has no value";
    transfer.why_ea = "halogen transfer is near the encounter limit; not modelled here";
    net.why_ea = "not an elementary step";
    abstraction.sources = d.sources;
    transfer.sources = bonds_.halide_sources(a, *d.site, x, rx);
    if (rx.entry < 0) merge(transfer.sources, d.sources);
    if (h.entry_hx >= 0) merge(abstraction.sources, bonds_.entry_sources(h.entry_hx));
    if (h.entry_xx >= 0) merge(transfer.sources, bonds_.entry_sources(h.entry_xx));
    net.sources = abstraction.sources;
    merge(net.sources, transfer.sources);
  }
  for (auto* q : {&abstraction, &transfer, &net}) q->temperature = t;
  if (!o.details) return;
  ThermoSum sa, st, sn;
  thermo_.add(sa, d.rh_entry, -1, d.rh);
  thermo_.add(sa, h.atom, -1, kAtom[x]);
  thermo_.add(sa, h.hydride, 1, kHydride[x]);
  thermo_.add(sa, d.r_entry, 1, d.radical);
  thermo_.add(st, d.r_entry, -1, d.radical);
  thermo_.add(st, h.molecule, -1, kMolecule[x]);
  thermo_.add(st, rx_entry, 1, rx_text);
  thermo_.add(st, h.atom, 1, kAtom[x]);
  thermo_.add(sn, d.rh_entry, -1, d.rh);
  thermo_.add(sn, h.molecule, -1, kMolecule[x]);
  thermo_.add(sn, rx_entry, 1, rx_text);
  thermo_.add(sn, h.hydride, 1, kHydride[x]);
  finish(abstraction, sa, t);
  finish(transfer, st, t);
  finish(net, sn, t);
}

void StepBook::terminations(const Analysis& a, const SiteData& d, std::size_t transfer_at, int x, double t, const BondOptions& o,
                            std::vector<StepAnswer>& out) const {
  // R + X is the transfer's bond; taken from the answer just made, so the two agree.
  const std::size_t at = out.size();
  out.resize(at + 2);
  StepAnswer &rx = out[at], &rr = out[at + 1];
  const StepAnswer* transfer = &out[transfer_at];
  const auto& h = halogens_[static_cast<std::size_t>(x)];
  rx.kind = rr.kind = StepKind::termination;
  rx.halogen = rr.halogen = static_cast<Halogen>(x);
  rx.radical = rr.radical = d.radical;
  rx.route = "bonds";
  if (transfer->dh && h.d_xx) {
    rx.dh = Quantity{transfer->dh->value - h.d_xx->value, std::sqrt(std::max(0.0, transfer->dh->u * transfer->dh->u - h.d_xx->u * h.d_xx->u))};
    rx.sources = transfer->sources;
  }
  if (d.d_rr) rr.dh = Quantity{-d.d_rr->value, d.d_rr->u};
  rx.temperature = rr.temperature = t;
  if (!o.details) return;
  const auto arrow = transfer->reaction.find(">>");
  const auto product = transfer->reaction.substr(arrow + 2, transfer->reaction.rfind('.') - arrow - 2);
  rx.reaction = fmt::format("{}.{}>>{}", d.radical, kAtom[x], product);
  rr.reaction = fmt::format("{}.{}>>{}", d.radical, d.radical, d.dimer);
  rr.route = "formation enthalpies";
  const bool plain = a.deuterium_count() == 0;
  const auto* rx_entry = plain ? thermo_.find(canonical_smiles(a.original().with_substituent(d.site->atom, kNumber[x]), false)) : nullptr;
  if (!rx.dh) rx.why_dh = transfer->why_dh;
  if (!rr.dh) rr.why_dh = "the table has no formation enthalpy of the dimer or of the radical";
  rx.why_ea = rr.why_ea = "recombination, no barrier";
  if (d.rr_entry != nullptr) rr.sources = thermo_.sources(*d.rr_entry);
  if (d.r_entry != nullptr) merge(rr.sources, thermo_.sources(*d.r_entry));
  ThermoSum sx, sr;
  thermo_.add(sx, d.r_entry, -1, d.radical);
  thermo_.add(sx, h.atom, -1, kAtom[x]);
  thermo_.add(sx, rx_entry, 1, product);
  thermo_.add(sr, d.r_entry, -2, d.radical);
  thermo_.add(sr, d.rr_entry, 1, d.dimer);
  finish(rx, sx, t);
  finish(rr, sr, t);
}

namespace {

// R-R from R: two copies joined at the free valence.
std::optional<Molecule> dimer_of(const Molecule& r) {
  std::vector<Atom> atoms;
  std::vector<Bond> bonds;
  int centre = -1;
  for (int copy = 0; copy < 2; ++copy) {
    const int base = copy * r.atom_count();
    for (int i = 0; i < r.atom_count(); ++i) {
      atoms.push_back(r.atom(i));
      if (r.atom(i).unpaired == 1) {
        atoms.back().unpaired = 0;
        centre = i;
      }
    }
    for (int i = 0; i < r.bond_count(); ++i) {
      Bond b = r.bond(i);
      b.a += base;
      b.b += base;
      bonds.push_back(b);
    }
  }
  if (centre < 0) return std::nullopt;
  bonds.push_back({centre, centre + r.atom_count(), BondOrder::single, false});
  auto m = Molecule::from_graph(std::move(atoms), std::move(bonds));
  if (!m.ok()) return std::nullopt;
  return std::move(m).value();
}

}  // namespace

std::vector<StepAnswer> StepBook::chain(const Analysis& a, const std::vector<SiteBond>& sites, std::span<const Halogen> halogens, double t, const BondOptions& o) const {
  std::vector<SiteData> data;
  const std::string rh = o.details ? canonical_smiles(a.original()) : std::string();
  const bool plain = a.deuterium_count() == 0;
  const auto* rh_entry = plain && o.details ? thermo_.find(a.key()) : nullptr;
  for (std::size_t i = 0; i < sites.size(); ++i) {
    const auto& s = a.sites()[i];
    if (a.original().atom(s.atom).element != element::C) continue;
    SiteData d;
    d.site = &s;
    d.bond = &sites[i];
    d.d = &d.bond->value;
    d.rh = rh;
    d.rh_entry = rh_entry;
    if (o.details) {
      const auto r = a.original().without_hydrogen(s.atom);
      d.radical = canonical_smiles(r);
      d.sources = bonds_.sources(a, s, *d.d);
      if (rh_entry != nullptr) d.r_entry = thermo_.find_radical(r, canonical_smiles(r, false));
      if (const auto rr = dimer_of(r)) {
        d.dimer = canonical_smiles(*rr);
        d.rr_entry = plain ? thermo_.find(canonical_smiles(*rr, false)) : nullptr;
      }
      const auto* h = thermo_.find("[H]");
      std::optional<Quantity> dfh_r;
      // The same order as in a free query, so that both give one number.
      if (d.r_entry != nullptr && d.r_entry->dfh298) {
        dfh_r = d.r_entry->dfh298;
      } else if (d.d->d && rh_entry != nullptr && rh_entry->dfh298 && h != nullptr && h->dfh298) {
        dfh_r = Quantity{rh_entry->dfh298->value + d.d->d->value - h->dfh298->value,
                         std::hypot(rh_entry->dfh298->u, d.d->d->u, h->dfh298->u)};
      }
      if (dfh_r && d.rr_entry != nullptr && d.rr_entry->dfh298) {
        d.d_rr = Quantity{2 * dfh_r->value - d.rr_entry->dfh298->value, std::hypot(2 * dfh_r->u, d.rr_entry->dfh298->u)};
      }
    }
    data.push_back(std::move(d));
  }
  std::vector<StepAnswer> out;
  out.reserve(halogens.size() * (data.size() * 5 + 2));
  for (const auto halogen : halogens) {
    const int x = static_cast<int>(halogen);
    const std::size_t first = out.size();  // initiation, then three steps per site
    initiation(x, t, o.details, out);
    for (const auto& d : data) site_steps(a, d, x, t, o, out);
    StepAnswer xx = *std::find_if(out.begin(), out.end(), [&](const StepAnswer& s) { return s.halogen == halogen && s.kind == StepKind::initiation; });
    xx.kind = StepKind::termination;
    if (xx.dh) xx.dh->value = -xx.dh->value;
    if (xx.ds) xx.ds = -*xx.ds;
    if (xx.dg) xx.dg = -*xx.dg;
    if (xx.log10_k) xx.log10_k = -*xx.log10_k;
    if (o.details) {
      xx.reaction = fmt::format("{}.{}>>{}", kAtom[x], kAtom[x], kMolecule[x]);
      xx.why_ea = "recombination on a third body, no barrier";
    }
    for (std::size_t i = 0; i < data.size(); ++i) terminations(a, data[i], first + 3 * i + 2, x, t, o, out);
    out.push_back(std::move(xx));
  }
  return out;
}

}  // namespace halostep
