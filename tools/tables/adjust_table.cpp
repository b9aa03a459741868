#include "tables/adjust_table.hpp"

#include <cmath>

#include "halostep/structure.hpp"
#include "tables/adjust_network.hpp"

namespace halostep {
namespace {

// Most pairs are tied only through the atoms, whose enthalpies are known best of all.
constexpr double kNoCorrelation = 1e-6;

std::size_t at(int i) { return static_cast<std::size_t>(i); }

std::vector<AdjustedLink> links(const Adjustment& a, std::size_t i) {
  const std::size_t n = a.values.size();
  std::vector<AdjustedLink> out;
  for (std::size_t j = 0; j <= i; ++j) {
    const double c = a.covariance[i * n + j], scale = a.covariance[i * n + i] * a.covariance[j * n + j];
    if (c != 0 && c * c > kNoCorrelation * kNoCorrelation * scale) out.push_back({static_cast<int>(j), c});
  }
  return out;
}

}  // namespace

std::optional<Error> adjust_table(Table& table) {
  table.adjusted.clear();
  const auto net = enthalpy_network(table);
  const auto solved = adjust_network(net.network);
  if (!solved.ok()) return solved.error();
  const auto& a = solved.value();
  table.adjusted.resize(net.network.unknowns.size());
  for (const auto& [key, x] : net.at) {
    auto& s = table.adjusted[at(x)];
    s.key = key;
    s.smiles = net.network.unknowns[at(x)].name;
    s.dfh298 = a.values[at(x)];
    s.datum = net.datum[at(x)];
    s.weight = net.weight[at(x)];
    s.links = links(a, at(x));
  }
  for (auto& b : table.bonds) {
    b.at_molecule = net.find(b.molecule);
    b.at_radical = net.find(b.radical);
    b.at_leaving = net.find(b.leaving);
    const auto form = net.bond_form(b);
    b.d298 = form.empty() ? b.combined : a.value(form);
    // Elements and data carry no error: a bond between fixed species keeps its own.
    if (!(b.d298.u > 0)) b.d298 = b.combined;
  }
  for (auto& s : table.species) {
    s.at = s.phase == "g" ? net.find(s.smiles) : -1;
    s.dfh298 = s.combined;
    if (s.at < 0 || !s.combined || net.relative[at(s.at)]) continue;
    const NetworkTerm one{s.at, 1};
    s.dfh298 = a.value({&one, 1});
  }
  return std::nullopt;
}

}  // namespace halostep
