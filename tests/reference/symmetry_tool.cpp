// Judged by rdkit_symmetry.py: reads SMILES lines from standard input and writes one line for each.
//
//   ok TAB classes of the heavy atoms, input order TAB canonical SMILES without stereo [TAB answer]
//   refused TAB CLASS
//
// The answer, with --answers: "bonds and shares", "bonds alone", "refused CLASS" or "not finite".
//
// Heavy atoms only: ordinary hydrogens are counts; a D or T atom stays out of the list but tells its neighbours apart.
#include <fmt/format.h>
#include <fmt/ranges.h>

#include <cmath>
#include <cstdio>
#include <iostream>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "halostep/engine.hpp"
#include "halostep/structure.hpp"

namespace {

using namespace halostep;

std::vector<int> heavy_classes(const Molecule& m) {
  const auto all = symmetry_classes(m);
  std::vector<int> heavy;
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).element != element::H) heavy.push_back(all[static_cast<std::size_t>(i)]);
  }
  return heavy;
}

bool finite(const Study& s) {
  const auto known = [](const std::optional<Quantity>& q) {
    return !q || (std::isfinite(q->value) && std::isfinite(q->u));
  };
  bool good = true;
  for (const auto& b : s.bonds) good = good && known(b.d298);
  for (const auto& t : s.steps) good = good && known(t.dh) && std::isfinite(t.k_cm3_s.value_or(0));
  for (const auto& h : s.halogens) {
    for (const auto& site : h.sites) good = good && std::isfinite(site.share_low) && std::isfinite(site.share_high);
  }
  return good;
}

// Bonds, steps and shares in one go, on both routes and with and without the texts.
std::string answer(const Engine& engine, const Molecule& m) {
  std::string found;
  for (const bool typed : {true, false}) {
    for (const bool details : {true, false}) {
      const auto s = engine.study(m, kAllHalogens, kReferenceTemperature, {typed, details});
      if (s.ok() && !finite(s.value())) return "not finite";
      if (!s.ok())
        found = fmt::format("refused {}", error_class_name(s.error().cls));
      else
        found = s.value().halogens.empty() ? "bonds alone" : "bonds and shares";
    }
  }
  return found;
}

std::string record(const std::string& line, const std::optional<Engine>& engine) {
  const auto m = parse_smiles(line);
  if (!m.ok()) return fmt::format("refused\t{}", error_class_name(m.error().cls));
  return fmt::format("ok\t{}\t{}{}", fmt::join(heavy_classes(m.value()), " "), canonical_smiles(m.value(), false),
                     engine ? fmt::format("\t{}", answer(*engine, m.value())) : "");
}

}  // namespace

int main(int argc, char** argv) {
  const bool answers = argc == 2 && std::string_view(argv[1]) == "--answers";
  if (argc > 1 && !answers) {
    fmt::print(stderr, "usage: {} [--answers] < SMILES lines\n", argv[0]);
    return 1;
  }
  std::optional<Engine> engine;
  if (answers) {
    auto opened = Engine::open();
    if (!opened.ok()) {
      fmt::print(stderr, "{}\n", opened.error().message);
      return 4;
    }
    engine.emplace(std::move(opened).value());
  }
  for (std::string line; std::getline(std::cin, line);) fmt::print("{}\n", record(line, engine));
  return 0;
}
