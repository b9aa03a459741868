#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <map>
#include <tuple>

#include "bonds/environment.hpp"
#include "halostep/structure.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

// Why a composition does not judge; the words stand in the notes of its rows.
struct Reason {
  const char *word, *why;
};
constexpr Reason kNotMeasured[] = {
    {"calculated back", "computed back from a scale per H"},
    {"arithmetic on rate", "evaluated from rate expressions that stand in the rate table"},
    {"one product named", "one product named, no composition"},
    {"a limit", "a limit"},
    {"yield or bound", "a yield or bound"},
    {"ionic", "an ionic reaction"},
    {"one allyl radical", "two ends of one radical"}};

struct Shares {
  std::vector<std::string> name;
  std::vector<double> seen, engine, naive, low, high, z;  // z: error in deviations of the share
  bool marked = false;  // a site is extrapolated
};

double sum_of(const std::vector<double>& v) {
  double sum = 0;
  for (const double x : v) sum += x;
  return sum;
}

void normalise(std::vector<double>& v) {
  const double sum = sum_of(v);
  for (auto& x : v) x /= sum;
}

double mean_error(const std::vector<double>& a, const std::vector<double>& b) {
  double sum = 0;
  for (std::size_t i = 0; i < a.size(); ++i) sum += std::abs(a[i] - b[i]);
  return sum / static_cast<double>(a.size());
}

// A neat arene complexes chlorine itself.
bool needs_complexing(const Molecule& m, const std::string& medium, const std::string& reagent) {
  if (carrier_of(reagent) != Halogen::Cl || medium != "neat") return false;
  const auto info = environment(m);
  return std::any_of(info.begin(), info.end(), [](const AtomInfo& i) { return i.kind == Substituent::aryl; });
}

// The two halves of a share's 95 % interval, each taken as half of a normal law.
double deviations(const SiteOutcome& s, double seen) {
  constexpr double kNormal = 1.96;
  const double half = seen > s.share ? s.share_high - s.share : s.share - s.share_low, off = std::abs(seen - s.share);
  return half > 0 ? kNormal * off / half : off > 0 ? std::numeric_limits<double>::infinity() : 0.0;
}

constexpr double kUnnamed = 0.03;  // more than rounding

// Products with their site; one that no site gives makes the mixture unanswered.
bool collect(const std::vector<const MixtureRow*>& rows, const Molecule& m, Halogen x, const HalogenOutcome& o,
             Shares& s) {
  double naive_all = 0;
  for (const auto& site : o.sites) naive_all += site.h_count * naive_per_h(x, m, site.atom);
  for (const auto& site : o.sites) s.marked = s.marked || site.extrapolated;
  for (const auto* row : rows) {
    const auto product = parse_smiles(row->product);
    if (!product.ok()) return false;
    const auto wanted = canonical_smiles(product.value(), false);
    const auto site = std::find_if(o.sites.begin(), o.sites.end(), [&](const SiteOutcome& q) {
      return canonical_smiles(m.with_substituent(q.atom, halogen_element(x)), false) == wanted;
    });
    if (site == o.sites.end()) return false;
    s.name.push_back(row->product);
    s.seen.push_back(row->fraction);
    s.engine.push_back(site->share);
    s.z.push_back(deviations(*site, row->fraction));
    s.low.push_back(site->share_low);
    s.high.push_back(site->share_high);
    s.naive.push_back(site->h_count * naive_per_h(x, m, site->atom) / naive_all);
  }
  if (const double rest = 1 - sum_of(s.seen); rest > kUnnamed || rows.size() == 1) {
    s.name.emplace_back("other");
    s.seen.push_back(rest);
    s.naive.push_back(1 - sum_of(s.naive));
    s.low.push_back(0);
    s.high.push_back(1);
    s.engine.push_back(1 - sum_of(s.engine));
    return true;
  }
  normalise(s.seen);
  normalise(s.engine);
  normalise(s.naive);
  return true;
}

std::string class_of(const MixtureRow& r, const Molecule& m, Halogen x, const std::string& medium) {
  if (medium.find(" M") != std::string::npos) return fmt::format("{}, complexing medium", r.reagent);
  if (!is_hydrocarbon(m))
    return fmt::format("{} + substituted", x == Halogen::Cl   ? "Cl2, SO2Cl2"
                                           : x == Halogen::Br ? "Br2, NBS"
                                                              : r.reagent);
  if (x != Halogen::Cl) return fmt::format("{} + hydrocarbons", r.reagent);
  if (m.ring_count() >= 3) return fmt::format("{} + adamantane", r.reagent);
  return fmt::format("{} + alkanes, {}", r.reagent, r.t < 315 ? "up to 40 C" : "100 to 300 C");
}

}  // namespace

std::optional<Halogen> carrier_of(const std::string& reagent) {
  if (reagent == "Cl2" || reagent == "SO2Cl2") return Halogen::Cl;
  if (reagent == "Br2" || reagent == "NBS") return Halogen::Br;
  if (reagent == "F2") return Halogen::F;
  return std::nullopt;
}

const char* not_measured(const MixtureRow& r) {
  for (const auto& [word, why] : kNotMeasured) {
    if (r.note.find(word) != std::string::npos) return why;
  }
  return nullptr;
}

bool is_hydrocarbon(const Molecule& m) { return formula(m).find_first_not_of("CH0123456789") == std::string::npos; }

double naive_per_h(Halogen x, const Molecule& m, int atom) {
  int carbons = 0;
  for (const auto& b : m.neighbours(atom)) carbons += m.atom(b.atom).element == element::C;
  const auto k = static_cast<std::size_t>(std::clamp(carbons, 1, 3) - 1);
  constexpr double kCl[] = {1, 3.8, 5}, kBr[] = {1, 82, 1600}, kF[] = {1, 1.2, 1.4};
  return x == Halogen::Cl ? kCl[k] : x == Halogen::Br ? kBr[k] : kF[k];
}

OutcomeOptions judged_conditions(const Engine& engine, const Molecule& m, const std::string& medium,
                                 const std::string& reagent) {
  OutcomeOptions o;
  if (engine.medium(medium).ok()) o.medium = medium;
  if (needs_complexing(m, medium, reagent) && engine.medium("toluene 8 M").ok()) o.medium = "toluene 8 M";
  if (reagent == "Br2") o.conversion = 0.5;  // NBS uses the HBr up
  return o;
}

void judge_mixtures(const FoldView& v, Validation& out) {
  std::map<std::tuple<std::string, std::string, double, std::string, int>, std::vector<const MixtureRow*>> groups;
  for (const auto& r : v.full.mixtures) {
    if (!r.superseded && v.folds.of(r.molecule) == v.fold)
      groups[{r.reagent, r.molecule, r.t, r.medium, r.source}].push_back(&r);
  }
  for (const auto& [key, rows] : groups) {
    const auto& r = *rows.front();
    const auto x = carrier_of(r.reagent);
    const auto m = parse_smiles(r.molecule);
    if (!x || !m.ok()) continue;
    const auto list = [&](Judged state, const char* why) {
      out.mixtures.list(r.reagent, fmt::format("{} + {} at {:.0f} K, {}, {}", r.reagent, r.molecule, r.t, r.medium,
                                               v.full.sources[static_cast<std::size_t>(r.source)].id), state, why);
    };
    if (const char* why = not_measured(r)) {
      list(Judged::not_asked, why);
      out.mixtures.tail += fmt::format("- not judged: {} + {} at {:.0f} K, {} ({}): {}\n", r.reagent, r.molecule, r.t,
                                       r.medium, v.full.sources[static_cast<std::size_t>(r.source)].id, why);
      continue;
    }
    // The substrate of the solvents' fits is the only one they have: judge_media takes these.
    if (r.medium.find(" M") != std::string::npos) continue;
    const auto conditions = judged_conditions(v.engine, m.value(), r.medium, r.reagent);
    // Without the solvents' substrate in the fold there is no solvent to stand for a neat arene.
    const bool self_complexing = needs_complexing(m.value(), r.medium, r.reagent), complexing = conditions.medium.find(" M") != std::string::npos;
    if (self_complexing && !complexing) {
      list(Judged::refused, "an arene that complexes chlorine; the solvents' substrate is held out with it");
      ++out.mixtures.classes[fmt::format("{}, complexing medium", r.reagent)].refused;
      continue;
    }
    auto& c = out.mixtures.classes[class_of(r, m.value(), *x, conditions.medium)];
    const Halogen one[] = {*x};
    const auto o = v.engine.outcome(m.value(), one, r.t, conditions);
    Shares s;
    if (!o.ok() || !collect(rows, m.value(), *x, o.value()[0], s)) {
      list(Judged::refused, o.ok() ? "a product at a site outside the domain" : "outside the domain");
      ++c.refused;
      continue;
    }
    const double e = mean_error(s.engine, s.seen);
    const double naive = mean_error(s.naive, s.seen);
    list(Judged::yes, "");
    auto& all = out.mixtures.classes["all of these"];
    for (auto* to : {&c, &all, &out.mixtures.classes[s.marked ? "all, marked extrapolated" : "all, not marked extrapolated"]}) to->add(e, naive);
    out.share_z.insert(out.share_z.end(), s.z.begin(), s.z.end());
    std::string text;
    for (std::size_t i = 0; i < s.seen.size(); ++i) {
      if (s.name[i] != "other") {
        for (auto* to : {&c, &all}) {
          ++to->with_u;
          to->within += s.seen[i] >= s.low[i] && s.seen[i] <= s.high[i];
        }
      }
      text += fmt::format("{}{} {:.2f} (seen {:.2f})", i ? ", " : "", s.name[i], s.engine[i], s.seen[i]);
    }
    out.mixtures.row(e, fmt::format("{} + {} at {:.0f} K, {}: {}", r.reagent, r.molecule, r.t,
                                    conditions.medium == "gas" ? r.medium : conditions.medium, text));
  }
}

}  // namespace halostep
