#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <map>
#include <optional>

#include "bonds/environment.hpp"
#include "bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "tables/fit.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

constexpr double kPerPrimary = 9.7e-12;  // Cl + C2H6 at 298 K (IUPAC, 5.8e-11) per H

std::string class_of(const Molecule& m, const std::string& carrier) {
  bool carbon_only = true, halogen = false, other = false, unsaturated = false;
  for (int i = 0; i < m.atom_count(); ++i) {
    const int z = m.atom(i).element;
    carbon_only = carbon_only && z == element::C;
    halogen = halogen || is_halogen(z);
    other = other || (z != element::C && !is_halogen(z));
  }
  for (int i = 0; i < m.bond_count(); ++i) unsaturated = unsaturated || m.bond(i).order != BondOrder::single;
  std::string name = "other organics";
  if (carbon_only && !unsaturated)
    name = m.atom_count() == 1 ? "methane" : "alkanes, cycloalkanes";
  else if (halogen && !other && !unsaturated)
    name = "haloalkanes";
  if (m.atom_count() == 3 && m.ring_count() == 1 && carbon_only) name = "cyclopropane";
  return carrier + " + " + name;
}

// The temperature at which a row judges, or 0 when it cannot.
double temperature_of(const RateRow& r) {
  if (r.carrier == "Cl" || r.carrier == "F") {
    const bool covers = !r.t_min || !r.t_max || (*r.t_min <= 310 && *r.t_max >= 285);
    return covers && (r.k298 || r.a) ? 298.15 : 0.0;
  }
  return r.a && r.t_min && r.t_max ? 0.5 * (*r.t_min + *r.t_max) : 0.0;
}

double rate_of(const RateRow& r, double t) {
  if (!r.a || !r.ea) return *r.k298;
  return *r.a * std::pow(t / 298.0, r.n) * std::exp(-*r.ea / (kGasConstant * t));
}

double naive_log_k(const std::vector<SiteOutcome>& sites, const Molecule& m) {
  double k = 0;
  for (const auto& s : sites) {
    const int carbons = m.degree(s.atom);
    k += s.h_count * kPerPrimary * (carbons <= 1 ? 1.0 : carbons == 2 ? 3.8 : 5.0);
  }
  return std::log10(k);
}

// Why a row does not count among the figures of its class, or nullptr.
const char* set_aside(const RateRow& r) {
  constexpr double kOrderOfMagnitude = 0.4;
  if (!r.fitted) return "rows set aside in the table";
  return r.u_log10 >= kOrderOfMagnitude ? "order of magnitude only" : nullptr;
}

// The table's words for what tells nothing of a C-H bond, or was not measured.
bool no_measurement(const RateRow& r) {
  constexpr const char* kWords[] = {"not measured", "recalled", "S-H", "O-H"};
  return !r.fitted && std::any_of(std::begin(kWords), std::end(kWords), [&](const char* w) { return r.note.find(w) != std::string::npos; });
}

bool has_carbon(const Molecule& m) {
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).element == element::C) return true;
  }
  return false;
}

// As the table says it, or in our own words.
std::string why_aside(const RateRow& r, const char* aside) { return r.note.empty() ? aside : fmt::format("{}: {}", aside, r.note); }

struct Answer {
  double log_k = 0, u = 0;
  bool marked = false;
  bool partly = false;  // a C-H the row speaks of is outside the domain and left out
  std::vector<SiteOutcome> sites;
};

// The sites a row speaks of; `partly` where the engine leaves one of them out.
std::vector<SiteOutcome> sites_of(const RateRow& r, const Molecule& m, std::vector<SiteOutcome> sites, bool& partly) {
  const auto classes = symmetry_classes(m);
  if (r.radical != "total") {
    const auto radical = parse_smiles(r.radical, ParseMode::species);
    const int site = radical.ok() ? find_site(m, classes, radical.value()) : -1;
    std::erase_if(sites, [&](const SiteOutcome& s) { return s.atom != site; });
    return sites;
  }
  const auto info = environment(m);
  for (const auto& h : hydrogen_sites(m, classes)) {
    const auto& a = info[static_cast<std::size_t>(h.atom)];
    if (m.atom(h.atom).element != element::C || (a.hybrid != Hybrid::sp3 && !a.carbonyl)) continue;
    partly = partly || std::none_of(sites.begin(), sites.end(), [&](const SiteOutcome& s) { return s.atom == h.atom; });
  }
  return sites;
}

std::optional<Answer> asked(const Engine& engine, const RateRow& r, const Molecule& m, double t) {
  const auto x = parse_halogen(r.carrier);
  if (!x.ok()) return std::nullopt;
  const Halogen one[] = {x.value()};
  const auto o = engine.outcome(m, one, t);
  if (!o.ok()) return std::nullopt;
  Answer a;
  a.sites = sites_of(r, m, o.value()[0].sites, a.partly);
  if (a.sites.empty()) return std::nullopt;
  double k = 0;
  for (const auto& s : a.sites) {
    k += s.k_cm3_s;
    a.u += s.k_cm3_s * s.u_log10_k;  // errors of sites taken as one
    a.marked = a.marked || s.extrapolated;
  }
  a.log_k = std::log10(k);
  a.u /= k;
  return a;
}

constexpr double kColdest = 200, kHottest = 700, kLeastRange = 40;
constexpr int kTemperatures = 5;

// One row over its own range, and at the temperature nearest 298 K.
void judge_range(const Engine& engine, const RateRow& r, const Molecule& m, Validation& out) {
  if (!r.a || !r.ea || !r.t_min || !r.t_max) return;
  const double low = std::max(*r.t_min, kColdest), high = std::min(*r.t_max, kHottest);
  if (high - low < kLeastRange) return;
  const auto at = [&](double t, const std::string& name) {
    const auto a = asked(engine, r, m, t);
    if (a && !a->partly)
      out.temperatures.classes[r.carrier + name].add(a->log_k - std::log10(rate_of(r, t)), std::hypot(a->u, r.u_log10),
                                                     std::nan(""));
  };
  at(std::clamp(kReferenceTemperature, low, high), ", the same rows near 298 K");
  for (int i = 0; i < kTemperatures; ++i) at(low + (high - low) * i / (kTemperatures - 1), ", five temperatures");
}

std::string name_of(const RateRow& r, const Molecule& m) {
  const auto* aside = set_aside(r);
  return aside != nullptr ? fmt::format("{} + {}", r.carrier, aside) : class_of(m, r.carrier);
}

// log10 k of the class's molecules that are not held out, as the naive answer with an uncertainty.
std::map<std::string, std::vector<double>> seen_by_class(const FoldView& v) {
  std::map<std::string, std::vector<double>> seen;
  for (const auto& r : v.full.rates) {
    if (r.superseded || r.carrier.empty() || v.folds.of(r.molecule) == v.fold || temperature_of(r) == 0) continue;
    if (const auto m = parse_smiles(r.molecule); m.ok())
      for (const auto& name : {name_of(r, m.value()), r.carrier}) seen[name].push_back(std::log10(rate_of(r, temperature_of(r))));
  }
  return seen;
}

// Ea of the step the rows of iodine tell of.
void judge_iodine(const Engine& engine, const RateRow& r, const Molecule& m, Validation& out) {
  constexpr double kUsual = 500;  // K, where a row states no range
  if (r.carrier != "I" || !r.ea) return;
  auto& c = out.reverse.classes["I + R-H, forward"];
  const auto a = asked(engine, r, m, r.t_min && r.t_max ? 0.5 * (*r.t_min + *r.t_max) : kUsual);
  if (!a || a->partly || a->sites.size() != 1)
    ++c.refused;
  else
    c.add(a->sites.front().ea - *r.ea, std::nan(""));
}

std::string key_of(const FoldView& v, const RateRow& r) {
  const auto range = r.t_min && r.t_max ? fmt::format("{:.0f}-{:.0f} K", *r.t_min, *r.t_max) : std::string("298 K");
  return fmt::format("{} + {} ({}), {}, {}", r.carrier, r.molecule, r.radical, range,
                     v.full.sources[static_cast<std::size_t>(r.source)].id);
}

}  // namespace

void judge_rates(const FoldView& v, Validation& out) {
  const auto others = seen_by_class(v);
  for (const auto& r : v.full.rates) {
    if (r.superseded || r.carrier.empty() || v.folds.of(r.molecule) != v.fold) continue;
    const auto m = parse_smiles(r.molecule);
    const double t = temperature_of(r);
    if (!m.ok() || !parse_halogen(r.carrier).ok()) continue;
    const auto* aside = set_aside(r);
    if (aside == nullptr) judge_range(v.engine, r, m.value(), out);
    judge_iodine(v.engine, r, m.value(), out);
    const auto name = name_of(r, m.value());
    const bool asked_of = !no_measurement(r) && has_carbon(m.value());
    const auto list = [&](Judged state, const std::string& why) {
      const auto reason = asked_of || !why.empty() ? why : std::string("no C-H");
      out.rates.list(name, key_of(v, r), asked_of ? state : Judged::not_asked, reason);
    };
    if (t == 0) {
      list(Judged::not_asked, "no value at the temperature that is judged");
      continue;
    }
    auto& c = out.rates.classes[name];
    const auto a = asked(v.engine, r, m.value(), t);
    if (!a) {
      list(Judged::refused, has_carbon(m.value()) ? aside == nullptr ? "outside the domain" : why_aside(r, aside) : "no C-H");
      ++c.refused;
      continue;
    }
    const double seen = std::log10(rate_of(r, t)), e = a->log_k - seen, u = std::hypot(a->u, r.u_log10);
    auto same = others.find(name);
    if (same == others.end() || same->second.size() < 2) same = others.find(r.carrier);  // a class of its own: all of the carrier
    auto mean = mean_and_deviation(same == others.end() ? std::vector<double>{} : same->second);
    mean = {mean.first - seen, std::hypot(mean.second, r.u_log10)};
    const double naive = r.carrier == "Cl" ? naive_log_k(a->sites, m.value()) - seen : std::nan("");
    out.rates.classes[fmt::format("{} + all, set aside and partly answered too", r.carrier)].add(e, u, naive);
    if (a->partly) {
      list(Judged::excluded, "answered in part: a C-H the row speaks of is outside the domain");
      ++c.refused;
      continue;
    }
    const auto add = [&](const std::string& to) { out.rates.classes[to].add(e, a->u, r.u_log10, naive, mean); };
    add(name);
    list(aside == nullptr ? Judged::yes : Judged::excluded, aside == nullptr ? std::string() : why_aside(r, aside));
    if (aside != nullptr) continue;
    add(fmt::format("{} + all", r.carrier));
    add(fmt::format("{} + all, {}marked extrapolated", r.carrier, a->marked ? "" : "not "));
    out.rows.push_back({r.carrier, e, a->u, a->marked});
    out.rates.row(
        e, fmt::format("{} + {} ({}) at {:.0f} K: {:.2e}, row {:.2e} cm3/s{}", r.carrier, r.molecule, r.radical, t,
                       std::pow(10, a->log_k), rate_of(r, t), a->marked ? " (marked extrapolated)" : ""));
  }
}

bool judge_alone(const Table& table, Validation& out) {
  for (const char* smiles : {"C", "C1CC1"}) {
    Table t = table;
    const auto is = [&](const std::string& s) { return s == smiles; };
    std::erase_if(t.rates, [&](const RateRow& r) { return !r.carrier.empty() && is(r.molecule); });
    std::erase_if(t.relative_rates,
                  [&](const RelativeRateRow& r) { return is(r.molecule) || is(r.reference_molecule); });
    auto models = fit_models(t);
    if (!models.ok()) return false;
    t.models = std::move(models).value();
    const auto engine = Engine::from_table(std::move(t));
    for (const auto& r : table.rates) {
      if (r.superseded || r.carrier != "Cl" || !is(r.molecule) || temperature_of(r) == 0) continue;
      const auto m = parse_smiles(r.molecule);
      const auto a = asked(engine.value(), r, m.value(), kReferenceTemperature);
      auto& c = out.rates.classes[class_of(m.value(), r.carrier) + ", its rates alone left out"];
      if (!a || a->partly)
        ++c.refused;
      else
        c.add(a->log_k - std::log10(rate_of(r, kReferenceTemperature)), std::hypot(a->u, r.u_log10), std::nan(""));
    }
  }
  return true;
}

}  // namespace halostep
