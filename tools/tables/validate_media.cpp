#include <fmt/format.h>

#include <cmath>
#include <map>

#include "tables/fit_medium.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

constexpr std::size_t kLeastRows = 2;

/// The composition of the two sites, as mole fraction of the first.
double fraction(const MediumSample& s, double ln_ratio) {
  const auto count = [&](std::size_t kind) {
    int n = 0;
    for (const auto& q : s.sites->sites) n += q.kind == static_cast<int>(kind) ? q.site->h_count : 0;
    return static_cast<double>(n);
  };
  const double a = count(s.kind) * std::exp(ln_ratio);
  return a / (a + count(s.reference));
}

void judge(const Engine::Impl& impl, const MediumSample& s, const FittedModel& m, const std::string& name,
           Validation& out) {
  const double value = medium_ln_ratio(impl, s, {m.values[0], m.values[1], m.values[2]}), e = value - s.ln_value;
  const double free = medium_ln_ratio(impl, s, {m.values[0], -50.0, m.values[2]});
  out.media.classes[name].add(e, free - s.ln_value);
  out.media.row(e, fmt::format("{} {} M at {:.0f} K: {:.1f}, row {:.1f} ({})", s.solvent, s.molarity, s.temperature,
                               std::exp(value), std::exp(s.ln_value), name));
  const bool fitted = name == "as fitted";
  out.media.list(s.solvent, fmt::format("{} {} M at {:.0f} K", s.solvent, s.molarity, s.temperature), fitted ? Judged::not_asked : Judged::yes,
                 fitted ? "the only row of its solvent: nothing is left when it is left out" : "");
  if (fitted) return;
  // The same as a mixture of two parts; its mean absolute error is that of either part.
  const double seen = fraction(s, s.ln_value);
  out.mixtures.classes["Cl2, complexing solvent, molarity left out"].add(fraction(s, value) - seen,
                                                                         fraction(s, free) - seen);
}

}  // namespace

std::optional<Error> judge_media(const Table& table, Validation& out) {
  const Engine::Impl impl(table);
  std::map<std::string, std::vector<MediumSample>> by_solvent;
  for (auto& s : medium_samples(impl)) by_solvent[s.solvent].push_back(std::move(s));
  for (const auto& [solvent, rows] : by_solvent) {
    if (rows.size() < kLeastRows) {
      if (const auto* m = find_model(table.models, kMediumPrefix + solvent))
        judge(impl, rows.front(), *m, "as fitted", out);
      continue;
    }
    for (std::size_t i = 0; i < rows.size(); ++i) {
      auto others = rows;
      others.erase(others.begin() + static_cast<std::ptrdiff_t>(i));
      const auto m = fit_solvent(impl, others, nullptr);
      if (!m.ok()) return m.error();
      judge(impl, rows[i], m.value(), solvent + ", left out", out);
    }
  }
  return std::nullopt;
}

}  // namespace halostep
