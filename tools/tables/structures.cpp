#include "tables/structures.hpp"

#include <fmt/format.h>

#include "bonds/locate.hpp"

namespace halostep {
namespace {

Structure prepared(Molecule m) {
  Structure s{std::move(m), {}, {}, 0};
  s.canonical = canonical_smiles(s.m, false);
  s.classes = symmetry_classes(s.m);
  for (int i = 0; i < s.m.atom_count(); ++i) {
    const auto& a = s.m.atom(i);
    s.hydrogens += a.hydrogens + (a.element == element::H && a.isotope == 0 ? 1 : 0);
  }
  return s;
}

}  // namespace

Structures::Slot& Structures::find(const std::string& text) {
  const auto [it, added] = seen_.try_emplace(text);
  if (!added) return it->second;
  // parse_smiles would take what follows a blank for a name.
  if (text.find_first_of(" \t\n") != std::string::npos) {
    it->second.why = "a blank in the structure";
    return it->second;
  }
  auto m = parse_smiles(text, ParseMode::species);
  if (m.ok()) {
    it->second.structure = std::make_unique<Structure>(prepared(std::move(m).value()));
  } else {
    it->second.why = fmt::format("{}, {}", m.error().message, m.error().place);
  }
  return it->second;
}

const Structure* Structures::in(const Row& row, std::string_view column) {
  const auto& text = row.needed(column);
  if (text.empty()) return nullptr;
  const auto& slot = find(text);
  if (!slot.structure) row.fault(fmt::format("{} '{}' does not parse: {}", column, text, slot.why));
  return slot.structure.get();
}

std::string species_key(const Structure& s) {
  return s.m.unpaired() == 0 ? s.canonical : species_key(s.m);
}

int radical_site(const Row& row, const Structure& s, const Structure& radical) {
  const int site = find_site(s.m, s.classes, radical.m);
  // The skeleton of a resonance form does not tell how many electrons are unpaired.
  const bool electrons = radical.m.unpaired() == s.m.unpaired() + 1;
  if (site >= 0 && electrons) return site;
  row.fault(fmt::format("{} is not {} less one H{}", radical.canonical, s.canonical,
                        site < 0 ? "" : ": the unpaired electrons differ"));
  return -1;
}

}  // namespace halostep
