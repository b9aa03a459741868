#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "halostep/structure.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

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
  return "O-H, N-H, S-H, Si-H";
}

double median(std::vector<double> v) {
  if (v.empty()) return std::numeric_limits<double>::quiet_NaN();
  const auto mid = v.begin() + static_cast<std::ptrdiff_t>(v.size() / 2);
  std::nth_element(v.begin(), mid, v.end());
  return *mid;
}

struct Asked {
  const BondEntry* entry = nullptr;
  BondAnswer answer;
};

// The table's bonds of one kind, each with the engine's typed answer.
std::vector<Asked> ask(const FoldView& v, bool hydrogen) {
  std::vector<Asked> out;
  for (const auto& b : v.full.bonds) {
    const bool halide = b.leaving == "[F]" || b.leaving == "[Cl]" || b.leaving == "[Br]" || b.leaving == "[I]";
    if (hydrogen ? b.leaving != "[H]" : !halide || b.radical == b.leaving) continue;
    const auto m = parse_smiles(b.molecule);
    if (!m.ok()) continue;
    const auto answers = v.engine.bonds(m.value(), {true, true});
    const auto radical = parse_smiles(b.radical, ParseMode::species);
    if (!answers.ok() || !radical.ok()) continue;
    const auto wanted = canonical_smiles(radical.value(), false);
    for (const auto& a : answers.value()) {
      const bool of_kind = hydrogen ? a.h_count > 0 : a.partner >= 0 && a.h_count == 0;
      const auto r = parse_smiles(a.radical, ParseMode::species);
      if (of_kind && r.ok() && canonical_smiles(r.value(), false) == wanted) {
        out.push_back({&b, a});
        break;
      }
    }
  }
  return out;
}

void judge(const FoldView& v, Section& s, bool hydrogen) {
  const auto asked = ask(v, hydrogen);
  const auto class_of = [&](const Asked& a) {
    return hydrogen ? family_of(a.answer.type) : "C-" + a.entry->leaving.substr(1, a.entry->leaving.size() - 2);
  };
  for (const auto& a : asked) {
    if (v.folds.of(a.entry->molecule) != v.fold) continue;
    auto& c = s.classes[class_of(a)];
    auto& all = s.classes[hydrogen ? "all C-H" : "all C-X"];
    const bool carbon = !hydrogen || a.answer.bond == "C-H";
    if (!a.answer.d298) {
      ++c.refused;
      all.refused += carbon;
      continue;
    }
    std::vector<double> others;
    for (const auto& o : asked) {
      if (class_of(o) == class_of(a) && v.folds.of(o.entry->molecule) != v.fold) others.push_back(o.entry->d298.value);
    }
    const double e = a.answer.d298->value - a.entry->d298.value, u = std::hypot(a.answer.d298->u, a.entry->d298.u);
    const double naive = median(others) - a.entry->d298.value;
    c.add(e, u, naive);
    if (carbon) all.add(e, u, naive);
    s.classes[a.answer.extrapolated ? "marked thin" : "not marked thin"].add(e, u, naive);
    s.row(e, fmt::format("{} > {}: {:.1f} u {:.1f}, table {:.1f} u {:.1f}{}", a.entry->molecule, a.entry->radical,
                         a.answer.d298->value, a.answer.d298->u, a.entry->d298.value, a.entry->d298.u,
                         a.answer.extrapolated ? " (marked thin)" : ""));
  }
}

}  // namespace

void judge_bonds(const FoldView& v, Validation& out) {
  judge(v, out.bonds, true);
  judge(v, out.halides, false);
}

}  // namespace halostep
