// What `halostep-tables adjust` prints, and the system it writes for others to solve.
#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <chrono>
#include <cmath>
#include <cstdio>
#include <fstream>
#include <map>

#include "tables/adjust_network.hpp"

namespace halostep {
namespace {

constexpr std::size_t kMostMoved = 20;
constexpr std::size_t kWidth = 100;

std::size_t at(int i) { return static_cast<std::size_t>(i); }

void print_size(const EnthalpyNetwork& net, const Adjustment& a) {
  const auto& n = net.network;
  const auto fixed =
      std::count_if(n.unknowns.begin(), n.unknowns.end(), [](const auto& u) { return u.fixed.has_value(); });
  std::array<int, 3> by_use{};
  for (const auto& r : net.rows) ++by_use[static_cast<std::size_t>(r.use)];
  std::map<int, int> group;
  for (const auto& o : n.observations) {
    if (o.group >= 0) ++group[o.group];
  }
  int grouped = 0;
  for (const auto& [g, members] : group) grouped += members;
  fmt::print("unknowns      {:>6}  ({} more species are fixed: elements and data)\n",
             n.unknowns.size() - at(static_cast<int>(fixed)), fixed);
  fmt::print("observations  {:>6}  ({} enthalpies, {} bonds, {} radical enthalpies behind derived bonds)\n",
             n.observations.size(), by_use[0], by_use[1], by_use[2]);
  fmt::print("redundancy    {:>6}\n", a.plain.freedom);
  fmt::print("copies        {:>6}  observations in {} groups share an error\n", grouped, group.size());
  for (const auto& [name, t] : {std::pair("plain", a.plain), std::pair("down-weighted", a.weighted)}) {
    fmt::print("chi-squared   {:>8.1f} ({}), per degree of freedom {:.2f}, P = {:.3g}\n", t.chi2, name,
               t.freedom > 0 ? t.chi2 / t.freedom : 0.0, t.p);
  }
  const auto lowered = std::count_if(a.checks.begin(), a.checks.end(), [](const auto& c) { return c.weight < 1; });
  fmt::print("down-weighted {:>6}  in {} rounds{}\n", lowered, a.rounds, a.converged ? "" : ", NOT CONVERGED");
}

void print_left_out(const EnthalpyNetwork& net) {
  for (const auto& [reason, l] : net.left_out) fmt::print("left out      {:>6}  {}\n", l.count, reason);
}

void print_parts(const EnthalpyNetwork& net) {
  const auto parts = network_parts(net.network);
  std::size_t single = 0, largest = 0;
  for (const auto& p : parts) {
    single += p.size() == 1;
    largest = std::max(largest, p.size());
  }
  fmt::print("parts         {:>6}  of which {} of one species; the largest has {}\n", parts.size(), single, largest);
  std::vector<std::string> data;
  for (std::size_t i = 0; i < net.relative.size(); ++i) {
    if (net.relative[i] && net.network.unknowns[i].fixed) data.push_back(net.network.unknowns[i].name);
  }
  const auto relative = std::count(net.relative.begin(), net.relative.end(), true);
  fmt::print("no enthalpy   {:>6}  species in {} parts known by bond energies alone, of the molecules\n", relative,
             data.size());
  for (std::size_t i = 0, length = 0; i < data.size(); ++i) {
    length += data[i].size() + 1;
    const bool full = length > kWidth || i + 1 == data.size();
    fmt::print("{}{}{}", length == data[i].size() + 1 ? "  " : " ", data[i], full ? "\n" : "");
    if (full) length = 0;
  }
}

void print_flagged(const EnthalpyNetwork& net, const Adjustment& a) {
  std::vector<std::size_t> flagged;
  for (std::size_t i = 0; i < a.checks.size(); ++i) {
    if (a.checks[i].flagged) flagged.push_back(i);
  }
  std::sort(flagged.begin(), flagged.end(),
            [&](auto x, auto y) { return std::abs(a.checks[x].w) > std::abs(a.checks[y].w); });
  fmt::print("\nflagged: {} observations with |w| above 3.29\n", flagged.size());
  fmt::print("{:>7} {:>7} {:>6} {:>9} {:>7} {:>8}  {}\n", "w", "w plain", "r", "value", "u", "residual", "observation");
  for (const auto i : flagged) {
    const auto& c = a.checks[i];
    const auto& o = net.network.observations[i];
    fmt::print("{:>7.1f} {:>7.1f} {:>6.3f} {:>9.2f} {:>7.3f} {:>8.2f}  {}\n", c.w, c.w_plain, c.redundancy, o.value,
               o.u, c.residual, o.name);
  }
}

void print_moved(const Table& table, const EnthalpyNetwork& net, const Adjustment& a) {
  struct Moved {
    const SpeciesEntry* s;
    Quantity now;
  };
  std::vector<Moved> moved;
  for (const auto& s : table.species) {
    const int x = s.phase == "g" && s.combined ? net.find(s.smiles) : -1;
    if (x < 0 || net.network.unknowns[at(x)].fixed) continue;
    const NetworkTerm one{x, 1};
    moved.push_back({&s, a.value({&one, 1})});
  }
  std::sort(moved.begin(), moved.end(), [](const Moved& x, const Moved& y) {
    return std::abs(x.now.value - x.s->combined->value) > std::abs(y.now.value - y.s->combined->value);
  });
  fmt::print("\nmoved most from the combined value:\n{:>9} {:>7} {:>9} {:>7} {:>7}  {}\n", "combined", "u", "adjusted",
             "u", "moved", "species");
  for (std::size_t i = 0; i < std::min(kMostMoved, moved.size()); ++i) {
    const auto& [s, now] = moved[i];
    fmt::print("{:>9.2f} {:>7.2f} {:>9.2f} {:>7.2f} {:>7.2f}  {}\n", s->combined->value, s->combined->u, now.value, now.u,
               now.value - s->combined->value, s->smiles);
  }
}

// One record a line; names hold neither commas nor quotes, SMILES having none.
bool write_system(const EnthalpyNetwork& net, const Adjustment& a, const std::string& path) {
  std::ofstream out(path, std::ios::binary);
  out << "record,index,name,other,value,u,group,weight,residual,redundancy,w\n";
  const auto n = net.network.unknowns.size();
  for (std::size_t i = 0; i < n; ++i) {
    const auto& x = net.network.unknowns[i];
    out << fmt::format("unknown,{},{},{},{},{},,,,,\n", i, x.name,
                       x.fixed           ? "fixed"
                       : net.relative[i] ? "relative"
                                         : "",
                       a.values[i], std::sqrt(a.covariance[i * n + i]));
  }
  for (std::size_t i = 0; i < net.network.observations.size(); ++i) {
    const auto& o = net.network.observations[i];
    const auto& c = a.checks[i];
    out << fmt::format("observation,{},{},,{},{},{},{},{},{},{}\n", i, o.name, o.value, o.u, o.group, c.weight,
                       c.residual, c.redundancy, c.w);
    for (const auto& t : o.terms) out << fmt::format("term,{},,{},{},,,,,,\n", i, t.unknown, t.factor);
  }
  for (std::size_t g = 0; g < a.common_u.size(); ++g) out << fmt::format("common,{},,,0,{},,,,,\n", g, a.common_u[g]);
  out.close();
  return !out.fail();
}

}  // namespace

int adjust_report(const Table& table, const std::string& csv) {
  const auto net = enthalpy_network(table);
  const auto start = std::chrono::steady_clock::now();
  const auto solved = adjust_network(net.network);
  const std::chrono::duration<double> took = std::chrono::steady_clock::now() - start;
  if (!solved.ok()) {
    fmt::print(stderr, "{}: {}\n", solved.error().place, solved.error().message);
    return 1;
  }
  const auto& a = solved.value();
  print_size(net, a);
  print_left_out(net);
  print_parts(net);
  fmt::print("solved in     {:>6.2f}  s\n", took.count());
  print_flagged(net, a);
  print_moved(table, net, a);
  if (!csv.empty() && !write_system(net, a, csv)) {
    fmt::print(stderr, "{}:0: cannot be written\n", csv);
    return 1;
  }
  return 0;
}

}  // namespace halostep
