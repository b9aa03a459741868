#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <map>
#include <optional>

#include "adjust/combine.hpp"
#include "bonds/features.hpp"
#include "bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

constexpr const char* kHetero = "O-H, N-H, S-H, Si-H";

// Families of C-H bonds, from the engine's name of the type.
std::string family_of(const std::string& type) {
  const auto has = [&](const char* word) { return type.find(word) != std::string::npos; };
  if (has("halogen")) return "haloalkyl";
  if (has("allylic") || has("benzylic") || has("propargylic")) return "allyl, propargyl, benzyl";
  if (has("C=O") || has("CN")) return "alpha to C=O, CN";
  if (has("alpha to")) return "alpha to O, N, S";
  if (has("acyl")) return "aldehyde";
  if (has("vinyl") || has("aryl") || has("alkynyl")) return "vinyl, aryl, alkynyl";
  if (has("bridgehead") || has("cyclo")) return "cycloalkyl";
  if (has("C-H")) return "alkyl";
  return kHetero;
}

double median(std::vector<double> v) {
  if (v.empty()) return std::numeric_limits<double>::quiet_NaN();
  const auto mid = v.begin() + static_cast<std::ptrdiff_t>(v.size() / 2);
  std::nth_element(v.begin(), mid, v.end());
  return *mid;
}

bool halide_of_carbon(const BondEntry& b) {
  const bool halogen = b.leaving == "[F]" || b.leaving == "[Cl]" || b.leaving == "[Br]" || b.leaving == "[I]";
  const auto r = parse_smiles(b.radical, ParseMode::species);
  if (!halogen || !r.ok()) return false;
  for (int i = 0; i < r.value().atom_count(); ++i) {
    if (r.value().atom(i).unpaired > 0) return r.value().atom(i).element == element::C;
  }
  return false;
}

// The class a bond is judged in; empty when it is of the other kind.
std::string class_of(const BondEntry& b, bool hydrogen) {
  if (!hydrogen) return halide_of_carbon(b) ? "C-" + b.leaving.substr(1, b.leaving.size() - 2) : std::string();
  if (b.leaving != "[H]") return {};
  const auto m = parse_smiles(b.molecule, ParseMode::species), r = parse_smiles(b.radical, ParseMode::species);
  const int atom = m.ok() && r.ok() ? find_site(m.value(), symmetry_classes(m.value()), r.value()) : -1;
  if (atom < 0) return {};
  const auto family = family_of(std::string(site_type(m.value(), environment(m.value()), atom)));
  const bool carbon = m.value().atom(atom).element == element::C;
  return carbon && family == kHetero ? "vinyl, aryl, alkynyl" : family;  // H-CN has no type of its own
}

// The engine's answer about one bond of the table; nothing when it does not find the bond.
std::optional<BondAnswer> ask(const FoldView& v, const BondEntry& b, bool hydrogen, bool typed) {
  const auto m = parse_smiles(b.molecule), radical = parse_smiles(b.radical, ParseMode::species);
  if (!m.ok() || !radical.ok()) return std::nullopt;
  const auto answers = v.engine.bonds(m.value(), {typed, true});
  if (!answers.ok()) return std::nullopt;
  const auto wanted = canonical_smiles(radical.value(), false);
  for (const auto& a : answers.value()) {
    const bool of_kind = hydrogen ? a.h_count > 0 : a.partner >= 0 && a.h_count == 0;
    const auto r = parse_smiles(a.radical, ParseMode::species);
    if (of_kind && r.ok() && canonical_smiles(r.value(), false) == wanted) return a;
  }
  return std::nullopt;
}

// A value known to no better than this cannot judge an answer, kJ/mol; it is shown in a class of its own.
constexpr double kJudgeLimit = 10.0;

// How bonds of one kind are judged; `whole` is the class that takes all of them.
struct Question {
  bool hydrogen = true, typed = true, detailed = true;
  const char* whole = "";
};

void judge(const FoldView& v, Section& s, const Question& q) {
  std::map<std::string, std::vector<double>> seen;  // values of the class that are not held out
  for (const auto& b : v.full.bonds) {
    if (v.folds.of(b.molecule) != v.fold) seen[class_of(b, q.hydrogen)].push_back(b.d298.value);
  }
  for (const auto& b : v.full.bonds) {
    if (v.folds.of(b.molecule) != v.fold) continue;
    const auto name = class_of(b, q.hydrogen);
    if (name.empty()) continue;
    const auto answer = ask(v, b, q.hydrogen, q.typed);
    const auto list = [&](Judged state, const char* why) {
      if (q.detailed) s.list(name, b.molecule + " > " + b.radical, state, why);
    };
    if (!answer) {
      list(Judged::refused, "outside the domain: the engine names no such bond, or has nothing on the molecule");
      if (q.detailed) ++s.classes[name].refused;
      s.classes[q.whole].refused += !q.hydrogen || name != kHetero;
      continue;
    }
    const bool carbon = !q.hydrogen || answer->bond == "C-H", judges = b.d298.u <= kJudgeLimit;
    const std::string whole = q.whole;
    if (!answer->d298) {
      list(Judged::refused, "outside the domain of the typed model");
      if (q.detailed) ++s.classes[name].refused;
      s.classes[whole].refused += carbon;
      continue;
    }
    const double e = answer->d298->value - b.d298.value, u = answer->d298->u;
    auto mean = mean_and_deviation(seen[name]);
    mean = {mean.first - b.d298.value, std::hypot(mean.second, b.d298.u)};
    const double naive = median(seen[name]) - b.d298.value;
    const auto add = [&](const std::string& c) { s.classes[c].add(e, u, b.d298.u, naive, mean); };
    if (carbon) add(whole + ", doubtful judges too");
    if (carbon && judges) add(whole);
    list(judges ? Judged::yes : Judged::excluded, judges ? "" : "u of the table's value is above 10 kJ/mol");
    if (!q.detailed || !judges) continue;
    add(name);
    add(answer->extrapolated ? "marked thin" : "not marked thin");
    s.row(e, fmt::format("{} > {}: {:.1f} u {:.1f}, table {:.1f} u {:.1f}{}", b.molecule, b.radical, answer->d298->value, u,
                         b.d298.value, b.d298.u, answer->extrapolated ? " (marked thin)" : ""));
  }
}

}  // namespace

void judge_bonds(const FoldView& v, Validation& out) {
  judge(v, out.bonds, {true, true, true, "all C-H"});
  judge(v, out.halides, {false, false, true, "all C-X"});
  judge(v, out.halides, {false, true, false, "all C-X, D(R-H) typed too"});
}

void judge_sources(const Table& t, Section& s) {
  for (const auto& b : t.bonds) {
    std::vector<const BondRow*> rows;
    for (const int i : b.rows) {
      const auto& r = t.bond_rows[static_cast<std::size_t>(i)];
      if (!r.superseded) rows.push_back(&r);
    }
    if (rows.size() < 2) continue;
    auto name = b.leaving == "[H]" ? class_of(b, true) : halide_of_carbon(b) ? "C-X" : "other bonds";
    if (name.empty()) name = "other bonds";
    for (const auto* r : rows) {
      std::vector<Quantity> rest;
      for (const auto* o : rows) {
        if (o->source != r->source) rest.push_back({o->d298, o->u});
      }
      if (rest.empty()) continue;
      const auto other = combine(rest).value;
      for (const auto& c : {name, std::string("all bonds")}) {
        s.classes[c].add(other.value - r->d298, other.u, r->u, std::numeric_limits<double>::quiet_NaN(), {0, 0});
      }
    }
  }
}

}  // namespace halostep
