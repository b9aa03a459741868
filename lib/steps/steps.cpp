#include "steps.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>

#include "halostep/structure.hpp"
#include "../bonds/sources.hpp"

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

constexpr double kUnknownCp = 10.0;  // J mol-1 K-1

// canonical_smiles(m, false); `text` is canonical_smiles(m).
std::string without_stereo(const Molecule& m, const std::string& text) {
  return m.tetrahedral().empty() && m.double_bonds().empty() ? text : canonical_smiles(m, false);
}

// Thousands of these per structure: hypot would guard against an overflow that cannot be.
Quantity minus(const Quantity& a, const Quantity& b) { return {a.value - b.value, std::sqrt(a.u * a.u + b.u * b.u)}; }

}  // namespace

void finish(StepAnswer& s, const ThermoSum& sum, double temperature) {
  s.temperature = temperature;
  if (!sum.s_known) {
    s.why_ds = fmt::format("no entropy in the table for {}", sum.missing);
    return;
  }
  // Without Cp of all species the change of Cp is taken as zero, with the u of a few J/(mol K) such changes have.
  const double dcp = sum.cp_known ? sum.cp : 0.0, u_cp = sum.cp_known ? u_of_cp(sum) : kUnknownCp,
               u_s = u_of_s(sum);
  const double by_cp = std::log(temperature / kReferenceTemperature);
  add_sources(s.sources, sum.sources);
  s.ds = Quantity{sum.s + dcp * by_cp, std::hypot(u_s, by_cp * u_cp)};
  if (!s.dh) return;
  const double warmed = temperature - kReferenceTemperature;
  const double dh = s.dh->value + dcp * warmed / 1000.0;
  s.dg = Quantity{dh - temperature * s.ds->value / 1000.0,
                  std::hypot(s.dh->u, temperature * u_s / 1000.0, (warmed - temperature * by_cp) * u_cp / 1000.0)};
  const double scale = kGasConstant * temperature * std::log(10.0);
  s.log10_k = Quantity{-s.dg->value / scale, s.dg->u / scale};
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
  std::array<std::optional<Quantity>, 4> d_rx;
};

StepBook::StepBook(const Table& table, const BondModel& model, const BondBook& bonds, const ThermoBook& thermo)
    : table_(table), model_(model), bonds_(bonds), thermo_(thermo), halogens_(4) {
  for (std::size_t x = 0; x < 4; ++x) {
    auto& h = halogens_[x];
    const auto hx = canonical_of(kHydride[x]), xx = canonical_of(kMolecule[x]);
    h.entry_hx = model_.measured(hx, kAtom[x], "[H]");
    h.entry_xx = model_.measured(xx, kAtom[x], kAtom[x]);
    const auto take = [&](int entry, std::optional<Quantity>& d, EnthalpySum& sum) {
      if (entry < 0) return;
      auto v = bonds.entry_value(entry);
      d = v.d;
      sum = std::move(v.sum);
    };
    take(h.entry_hx, h.d_hx, h.sum_hx);
    take(h.entry_xx, h.d_xx, h.sum_xx);
    if (!h.sum_hx.empty() && !h.sum_xx.empty()) {
      auto pair = h.sum_xx;
      add_terms(pair, h.sum_hx, -1);
      h.u2_pair = bonds.adjusted().covariance(pair, pair);
    } else if (h.d_hx && h.d_xx) {
      h.u2_pair = h.d_hx->u * h.d_hx->u + h.d_xx->u * h.d_xx->u;
    }
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
  s.route = kJoint;
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

// One number for a step whichever way it is asked for: sums of adjusted enthalpies where all parts are in the
// adjustment, so that what cancels leaves no u behind; else differences of bonds.
void StepBook::enthalpies(const BondValue& rh, const BondValue& rx, const Quantity& delta, const HalogenData& h,
                          StepAnswer& abstraction, StepAnswer& transfer, StepAnswer& net) const {
  const auto& book = bonds_.adjusted();
  const auto difference = [&](const EnthalpySum& one, const EnthalpySum& other) {
    auto sum = one;
    add_terms(sum, other, -1);
    return book.value(sum);
  };
  abstraction.route = rh.sum.empty() ? kTyped : kJoint;
  if (!rh.sum.empty() && !h.sum_hx.empty()) abstraction.dh = difference(rh.sum, h.sum_hx);
  else if (rh.d && h.d_hx) abstraction.dh = minus(*rh.d, *h.d_hx);
  transfer.route = !rx.sum.empty() ? kJoint : !rx.exchange.empty() || rh.route != Route::typed ? kMixed : kTyped;
  if (!rx.sum.empty() && !h.sum_xx.empty()) {
    transfer.dh = difference(h.sum_xx, rx.sum);
  } else if (rx.d && !rx.exchange.empty()) {
    transfer.dh = difference(h.sum_xx, rx.exchange);
    if (transfer.dh) transfer.dh = minus(*transfer.dh, *rh.d);
  } else if (rx.d && !rh.sum.empty() && rx.route == Route::typed) {
    transfer.dh = difference(h.sum_xx, rh.sum);
    if (transfer.dh) transfer.dh = minus(*transfer.dh, delta);
  } else if (rx.d && h.d_xx) {
    transfer.dh = minus(*h.d_xx, *rx.d);
  }
  if (!abstraction.dh || !transfer.dh) return;
  // The two bonds share the radical: D(R-X) made from D(R-H) leaves only the exchange.
  EnthalpySum pair;
  if (!rh.sum.empty() && !rx.sum.empty()) {
    pair = rh.sum;
    add_terms(pair, rx.sum, -1);
  } else if (!rx.exchange.empty()) {
    add_terms(pair, rx.exchange, -1);
  }
  if (!pair.empty()) {
    add_terms(pair, h.sum_xx, 1);
    add_terms(pair, h.sum_hx, -1);
    net.route = kJoint;
    net.dh = book.value(pair);
  }
  if (net.dh) return;
  net.route = rh.route == Route::typed || rx.route == Route::typed ? kTyped : kJoint;
  const double both2 = rx.route == Route::typed ? delta.u * delta.u : rh.d->u * rh.d->u + rx.d->u * rx.d->u;
  net.dh = Quantity{abstraction.dh->value + transfer.dh->value, std::sqrt(both2 + h.u2_pair)};
}

void StepBook::site_steps(const Analysis& a, SiteData& d, int x, double t, const BondOptions& o,
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
    s->temperature = t;
    s->radical = d.radical;
  }
  const Quantity& delta = d.bond->delta[static_cast<std::size_t>(x)];
  const auto rx = bonds_.halide(a, *d.site, x, *d.d, delta, o.typed);
  d.d_rx[static_cast<std::size_t>(x)] = rx.d;
  enthalpies(*d.d, rx, delta, h, abstraction, transfer, net);
  const SpeciesEntry* rx_entry = nullptr;
  std::string rx_text;
  if (o.details) {
    const auto halide = a.original().with_substituent(d.site->atom, kNumber[x]);
    rx_text = canonical_smiles(halide);
    rx_entry = thermo_.find(a.deuterium_count() == 0 ? without_stereo(halide, rx_text) : std::string());
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
    if (rx.entry < 0) add_sources(transfer.sources, d.sources);
    if (h.entry_hx >= 0) add_sources(abstraction.sources, bonds_.entry_sources(h.entry_hx));
    if (h.entry_xx >= 0) add_sources(transfer.sources, bonds_.entry_sources(h.entry_xx));
    net.sources = abstraction.sources;
    add_sources(net.sources, transfer.sources);
  }
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
  rx.route = transfer->route;
  if (const auto& d_rx = d.d_rx[static_cast<std::size_t>(x)]) {
    rx.dh = Quantity{-d_rx->value, d_rx->u};
    rx.sources = transfer->sources;
  }
  if (d.d_rr) rr.dh = Quantity{-d.d_rr->value, d.d_rr->u};
  rx.temperature = rr.temperature = t;
  if (!o.details) return;
  const auto arrow = transfer->reaction.find(">>");
  const auto product = transfer->reaction.substr(arrow + 2, transfer->reaction.rfind('.') - arrow - 2);
  rx.reaction = fmt::format("{}.{}>>{}", d.radical, kAtom[x], product);
  rr.reaction = fmt::format("{}.{}>>{}", d.radical, d.radical, d.dimer);
  rr.route = d.d->sum.empty() ? kMixed : kJoint;
  const bool plain = a.deuterium_count() == 0;
  const auto halide = a.original().with_substituent(d.site->atom, kNumber[x]);
  const auto* rx_entry = plain ? thermo_.find(without_stereo(halide, product)) : nullptr;
  if (!rx.dh) rx.why_dh = transfer->why_dh;
  if (!rr.dh) rr.why_dh = "the table has no formation enthalpy of the dimer or of the radical";
  rx.why_ea = rr.why_ea = "recombination, no barrier";
  if (d.rr_entry != nullptr) rr.sources = thermo_.sources(*d.rr_entry);
  if (d.r_entry != nullptr) add_sources(rr.sources, thermo_.sources(*d.r_entry));
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

// R-R = 2 R - RR with R = RH + D - H.
std::optional<Quantity> StepBook::dimer_bond(const Analysis& a, const BondValue& d, const std::string& dimer) const {
  const auto& book = bonds_.adjusted();
  const int rr = book.find(dimer), rh = bonds_.adjusted_index(a), h = book.atom("[H]");
  if (rr < 0 || rh < 0 || h < 0 || !d.d) return std::nullopt;
  EnthalpySum sum{{rh, 2}, {h, -2}};
  add_term(sum, rr, -1);
  add_terms(sum, d.sum, 2);
  auto q = book.value(sum);
  if (q && d.sum.empty()) q = Quantity{q->value + 2 * d.d->value, std::hypot(q->u, 2 * d.d->u)};
  return q;
}

std::vector<StepAnswer> StepBook::chain(const Analysis& a, const std::vector<SiteBond>& sites, std::span<const Halogen> halogens, double t, const BondOptions& o) const {
  std::vector<SiteData> data;
  data.reserve(sites.size());
  const std::string rh = o.details ? canonical_smiles(a.original()) : std::string();
  const bool plain = a.deuterium_count() == 0;
  const auto* rh_entry = plain && o.details ? thermo_.find(a.key()) : nullptr;
  for (std::size_t i = 0; i < sites.size(); ++i) {
    const auto& s = a.sites()[i];
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
      if (rh_entry != nullptr) d.r_entry = thermo_.find_radical(r, without_stereo(r, d.radical));
      if (const auto rr = dimer_of(r)) {
        d.dimer = canonical_smiles(*rr);
        d.rr_entry = plain ? thermo_.find(canonical_smiles(*rr, false)) : nullptr;
        if (plain) d.d_rr = dimer_bond(a, *d.d, canonical_smiles(*rr, false));
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
    for (auto& d : data) site_steps(a, d, x, t, o, out);
    StepAnswer xx = *std::find_if(out.begin(), out.end(), [&](const StepAnswer& s) { return s.halogen == halogen && s.kind == StepKind::initiation; });
    xx.kind = StepKind::termination;
    for (auto* q : {&xx.dh, &xx.ds, &xx.dg, &xx.log10_k}) {
      if (*q) (*q)->value = -(*q)->value;
    }
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
