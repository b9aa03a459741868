// Shared by the tests that ask the engine: one engine over the built-in table.
#pragma once
#include <gtest/gtest.h>

#include <string>
#include <string_view>

#include "halostep/engine.hpp"
#include "halostep/structure.hpp"

namespace halostep {

inline const Engine& engine() {
  static const Engine shared = [] {
    auto e = Engine::open();
    if (!e.ok()) {
      ADD_FAILURE() << e.error().message;
      return std::move(Engine::from_table({})).value();
    }
    return std::move(e).value();
  }();
  return shared;
}

/// A structure that must be readable; radicals and atoms allowed.
inline Molecule read(std::string_view smiles) {
  auto m = parse_smiles(smiles, ParseMode::species);
  if (!m.ok()) {
    ADD_FAILURE() << smiles << ": " << m.error().message << " (" << m.error().place << ")";
    return {};
  }
  return std::move(m).value();
}

inline std::string same_as(std::string_view smiles) { return canonical_smiles(read(smiles)); }

/// All bonds of a structure that must be answered.
inline std::vector<BondAnswer> bonds(std::string_view smiles, bool typed = false) {
  auto r = engine().bonds(read(smiles), {typed, true});
  if (!r.ok()) {
    ADD_FAILURE() << smiles << ": " << r.error().message;
    return {};
  }
  return std::move(r).value();
}

/// The bond that gives this radical; a failure and an empty answer when there is none.
inline const BondAnswer& find(const std::vector<BondAnswer>& all, std::string_view bond, std::string_view radical) {
  static const BondAnswer none;
  const auto wanted = same_as(radical);
  for (const auto& b : all) {
    if (b.bond == bond && b.radical == wanted) return b;
  }
  ADD_FAILURE() << "no " << bond << " to " << radical;
  return none;
}

/// Rates and shares of one halogen; a failure and an empty answer when refused.
inline HalogenOutcome outcome_of(std::string_view smiles, Halogen x, double temperature, const OutcomeOptions& o) {
  const Halogen one[] = {x};
  auto r = engine().outcome(read(smiles), one, temperature, o);
  if (!r.ok()) {
    ADD_FAILURE() << smiles << ": " << r.error().message;
    return {};
  }
  return std::move(r.value()[0]);
}

/// Substrates of every kind the typed model covers.
inline constexpr std::string_view kSubstrates[] = {
    "C",         "CC",         "CCC",           "CCCC",     "CC(C)C",       "CC(C)(C)C",   "CC(C)C(C)C",
    "CCCCCCCC",  "C1CC1",      "C1CCCC1",       "C1CCCCC1", "CC1CCCCC1",    "C1CC2CCC1C2", "C1C2CC3CC1CC(C2)C3",
    "Cc1ccccc1", "CCc1ccccc1", "CC(C)c1ccccc1", "CC=C",     "CC(C)=C",      "CC#C",        "CO",
    "CCO",       "COC",        "C1CCOC1",       "CC=O",     "CC(C)=O",      "CC(=O)OC",    "CC(=O)O",
    "CC#N",      "CN(C)C",     "CSC",           "CF",       "CCl",          "ClCCl",       "ClC(Cl)Cl",
    "CC(F)(F)F", "CCCl",       "CCBr",          "FCCF",     "C[N+](=O)[O-]"};

}  // namespace halostep
