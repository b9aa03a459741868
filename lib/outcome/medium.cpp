#include "outcome/medium.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "halostep/quantity.hpp"

namespace halostep {
namespace {

constexpr const char* kInert[] = {"gas", "neat", "CCl4", "Freon"};
constexpr double kOverfull = 1.02;  // molarities are rounded

// cm3/mol of a liquid of n heavy atoms: 35 + 16 n meets hexane (131.6) and octane (163.5), handbook densities from
// memory.
constexpr double kVolumeBase = 35, kVolumePerAtom = 16;

std::string_view trimmed(std::string_view s) {
  while (!s.empty() && s.front() == ' ') s.remove_prefix(1);
  while (!s.empty() && s.back() == ' ') s.remove_suffix(1);
  return s;
}

char lower(char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; }

/// Names of solvents are read in either case: "Benzene", "cs2".
bool same_name(std::string_view a, std::string_view b) {
  return std::equal(a.begin(), a.end(), b.begin(), b.end(), [](char x, char y) { return lower(x) == lower(y); });
}

Error usage(std::string what) { return {ErrorClass::usage, std::move(what), "medium"}; }

}  // namespace

Result<Medium> split_medium(std::string_view text) {
  text = trimmed(text);
  Medium m;
  // "8 M" or "8M"; a name may itself end in M.
  const bool molar = text.size() > 2 && text.ends_with('M') &&
                     (text[text.size() - 2] == ' ' || (text[text.size() - 2] >= '0' && text[text.size() - 2] <= '9'));
  if (molar) {
    const auto rest = trimmed(text.substr(0, text.size() - 1));
    const auto space = rest.rfind(' ');
    const auto number =
        space == std::string_view::npos ? Result<double>(usage("")) : parse_number(rest.substr(space + 1));
    if (!number.ok() || !(number.value() > 0)) {
      return usage(fmt::format("'{}' is no medium: a name and its molarity, as in \"benzene 8 M\"", text));
    }
    m.molarity = number.value();
    text = trimmed(rest.substr(0, space));
  }
  if (text.empty()) return usage("the medium is empty; \"gas\" is the one without a solvent");
  m.solvent = std::string(text);
  return m;
}

MediumBook::MediumBook(const Table& table) {
  for (const auto& model : table.models) {
    if (!model.name.starts_with(kMediumPrefix) || model.values.size() != mp::total) continue;
    Complexing c;
    c.name = model.name.substr(std::string_view(kMediumPrefix).size());
    std::copy(model.values.begin(), model.values.end(), c.p.value.begin());
    std::copy(model.covariance.begin(), model.covariance.end(), c.p.covariance.begin());
    for (const auto& [name, v] : model.settings) {
      if (name == kPureSetting) c.pure = v;
      if (name == "scatter") c.scatter = v;
      if (name == "T low") c.t_low = v;
      if (name == "T high") c.t_high = v;
    }
    solvents_.push_back(std::move(c));
  }
}

bool MediumBook::inert(std::string_view solvent) {
  return std::any_of(std::begin(kInert), std::end(kInert), [&](const char* s) { return same_name(s, solvent); });
}

const Complexing* MediumBook::find(std::string_view solvent) const {
  const auto it =
      std::find_if(solvents_.begin(), solvents_.end(), [&](const Complexing& c) { return same_name(c.name, solvent); });
  return it == solvents_.end() ? nullptr : &*it;
}

Result<Medium> MediumBook::parse(std::string_view text) const {
  auto m = split_medium(text);
  if (!m.ok()) return m;
  auto& v = m.value();
  for (const char* s : kInert) {
    if (!same_name(s, v.solvent)) continue;
    v.solvent = s;
    return m;
  }
  const auto* c = find(v.solvent);
  if (c != nullptr) v.solvent = c->name;
  if (c == nullptr) {
    std::string known;
    for (const auto& s : solvents_) known += ", " + s.name;
    return usage(fmt::format("unknown solvent '{}'; inert: {}; complexing, with a molarity: {}", v.solvent,
                             fmt::join(kInert, ", "), known.empty() ? "none in this table" : known.substr(2)));
  }
  if (!(v.molarity > 0))
    return usage(fmt::format("{0} complexes chlorine atoms: say how much, as in \"{0} 4 M\"", v.solvent));
  if (v.molarity > kOverfull * c->pure) {
    return usage(fmt::format("{} M of {} is more than the pure liquid holds ({} M)", format_fixed(v.molarity, 2),
                             v.solvent, format_fixed(c->pure, 1)));
  }
  v.complexing = true;
  return m;
}

std::string MediumBook::text(const Medium& m) {
  if (!(m.molarity > 0)) return m.solvent;
  auto number = format_fixed(m.molarity, 3);
  while (number.back() == '0') number.pop_back();
  if (number.back() == '.') number.pop_back();
  return m.solvent + " " + number + " M";
}

double substrate_molarity(int heavy_atoms, double solvent_molarity, double pure) {
  const double left = std::max(0.0, 1 - solvent_molarity / pure);
  return left * 1000 / (kVolumeBase + kVolumePerAtom * heavy_atoms);
}

MediumEffect medium_effect(const CarbonSites& s, const KindRates& free, const CarrierModel& m, double d_hx,
                           const std::array<double, mp::total>& p, double solvent_molarity, double substrate_molarity,
                           double temperature) {
  MediumEffect out;
  for (const auto& k : s.kinds) {
    out.at.push_back(site_rate(m.p, m.form, k.rate, k.d.value - d_hx + p[mp::binding], temperature));
  }
  double bound = 0;  // all H of the molecule, complexed atom
  for (const auto& q : s.sites) {
    if (q.kind >= 0) bound += q.site->h_count * std::exp(out.at[static_cast<std::size_t>(q.kind)].ln_k);
  }
  // Complexed per free atom. The complex is used up by the substrate too, so dissociation does not keep it at
  // equilibrium.
  const double van_t_hoff = p[mp::binding] / kGasConstant * (1 / temperature - 1 / kReferenceTemperature);
  const double k = std::exp(p[mp::ln_k] + van_t_hoff);
  const double per_free = k * solvent_molarity / (1 + k * bound * substrate_molarity / std::exp(p[mp::ln_trap]));
  for (std::size_t i = 0; i < s.kinds.size(); ++i) {
    const double ratio = per_free * std::exp(out.at[i].ln_k - free.at[i].ln_k);
    out.ln_factor.push_back(std::log1p(ratio));
    out.complexed.push_back(ratio / (1 + ratio));
  }
  return out;
}

void add_medium(ShareFactors& f, const CarbonSites& s, const KindRates& free, const CarrierModel& m, double d_hx,
                const Complexing& solvent, double solvent_molarity, int heavy_atoms, double temperature) {
  const double rh = substrate_molarity(heavy_atoms, solvent_molarity, solvent.pure);
  const auto& p = solvent.p.value;
  const auto at = [&](const std::array<double, mp::total>& v) {
    return medium_effect(s, free, m, d_hx, v, solvent_molarity, rh, temperature);
  };
  const auto e = at(p);
  f.outer_covariance = solvent.p.covariance;
  for (std::size_t j = 0; j < mp::total; ++j) {
    constexpr double kStep = 1e-4;
    auto up = p, down = p;
    up[j] += kStep;
    down[j] -= kStep;
    const auto a = at(up), b = at(down);
    for (std::size_t k = 0; k < s.kinds.size(); ++k)
      f.kinds[k].outer[j] = (a.ln_factor[k] - b.ln_factor[k]) / (2 * kStep);
  }
  for (std::size_t k = 0; k < s.kinds.size(); ++k) {
    auto& w = f.kinds[k];
    w.medium = e.ln_factor[k];
    w.complexed = e.complexed[k];
    w.own = e.complexed[k] * e.complexed[k] * solvent.scatter * solvent.scatter;
    const auto bound = rate_gradient(m.p, m.form, s.kinds[k].rate, e.at[k], temperature);
    w.gradient = weighted_sum(free.gradient[k], 1 - e.complexed[k], bound, e.complexed[k]);
  }
}

}  // namespace halostep
