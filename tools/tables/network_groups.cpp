#include "tables/network_groups.hpp"

#include <algorithm>
#include <cmath>
#include <map>
#include <numeric>
#include <optional>
#include <set>
#include <string>

namespace halostep {
namespace {

// Values of one origin differ by rounding: 0.1 kcal/mol at most, and by little beside their own u.
constexpr double kRounding = 0.1 * kKjPerKcal;
constexpr double kShareOfU = 0.3;

// Two reports of one laboratory on one species may read the same data anew; they are taken for that when they agree.
constexpr double kSameAuthors = 1.0;

std::size_t at(int i) { return static_cast<std::size_t>(i); }

// Surnames of a citation "Surname, A. B.; Surname, C., Journal ...".
std::set<std::string> authors(const std::string& citation) {
  std::set<std::string> names;
  for (std::size_t from = 0; from < citation.size();) {
    const auto end = std::min(citation.find(';', from), citation.size());
    const auto comma = citation.find(',', from);
    const auto first = citation.find_first_not_of(' ', from);
    if (comma < end) names.insert(citation.substr(first, comma - first));
    from = end + 1;
  }
  return names;
}

bool share_an_author(const SourceRow& a, const SourceRow& b) {
  const auto x = authors(a.citation), y = authors(b.citation);
  return std::any_of(x.begin(), x.end(), [&](const auto& name) { return y.contains(name); });
}

// The enthalpy of the species a row is about: a bond energy is turned into one by the combined values of its others.
std::optional<double> implied(const EnthalpyNetwork& net, const std::map<int, double>& combined, int o) {
  const auto& obs = net.network.observations[at(o)];
  double value = obs.value, own = 0;
  for (const auto& t : obs.terms) {
    if (t.unknown == net.rows[at(o)].about) {
      own = t.factor;
      continue;
    }
    const auto known = combined.find(t.unknown);
    if (known == combined.end()) return std::nullopt;
    value -= t.factor * known->second;
  }
  return value / own;
}

bool copies(const Table& t, const EnthalpyNetwork& net, const std::map<int, double>& combined, int a, int b) {
  const auto& ra = net.rows[at(a)];
  const auto& rb = net.rows[at(b)];
  const auto measured = [&](const NetworkRow& r) { return t.sources[at(r.source)].kind == "measurement"; };
  if (ra.source == rb.source) return ra.use != RowUse::enthalpy && rb.use != RowUse::enthalpy && measured(ra);
  const bool laboratory = measured(ra) && measured(rb);
  if (laboratory && !share_an_author(t.sources[at(ra.source)], t.sources[at(rb.source)])) return false;
  const auto& oa = net.network.observations[at(a)];
  const auto& ob = net.network.observations[at(b)];
  auto x = implied(net, combined, a), y = implied(net, combined, b);
  if (!x || !y) {
    const auto same = [](const NetworkTerm& p, const NetworkTerm& q) {
      return p.unknown == q.unknown && p.factor == q.factor;
    };
    if (!std::equal(oa.terms.begin(), oa.terms.end(), ob.terms.begin(), ob.terms.end(), same)) return false;
    x = oa.value;
    y = ob.value;
  }
  const double u = std::min(oa.u, ob.u);
  return std::abs(*x - *y) <= (laboratory ? kSameAuthors * u : std::min(kRounding, kShareOfU * u));
}

}  // namespace

void group_copies(const Table& table, EnthalpyNetwork& net) {
  std::map<int, double> combined;
  for (std::size_t i = 0; i < net.network.unknowns.size(); ++i) {
    if (net.network.unknowns[i].fixed) combined.emplace(static_cast<int>(i), *net.network.unknowns[i].fixed);
  }
  for (const auto& s : table.species) {
    const int x = s.phase == "g" && s.combined ? net.find(s.smiles) : -1;
    if (x >= 0) combined.emplace(x, s.combined->value);
  }
  std::map<int, std::vector<int>> about;
  for (std::size_t o = 0; o < net.rows.size(); ++o) about[net.rows[o].about].push_back(static_cast<int>(o));
  int groups = 0;
  for (const auto& [unknown, list] : about) {
    for (std::size_t i = 0; i < list.size(); ++i) {
      for (std::size_t j = i + 1; j < list.size(); ++j) {
        if (!copies(table, net, combined, list[i], list[j])) continue;
        auto& a = net.network.observations[at(list[i])].group;
        auto& b = net.network.observations[at(list[j])].group;
        if (a < 0 && b < 0) {
          a = b = groups++;
        } else if (a < 0 || b < 0) {
          a = b = std::max(a, b);
        } else if (a != b) {
          const int from = b, to = a;
          for (const int k : list) {
            auto& g = net.network.observations[at(k)].group;
            if (g == from) g = to;
          }
        }
      }
    }
  }
}

}  // namespace halostep
