#include "grid.hpp"
#include "halostep/report.hpp"

namespace halostep {

// Common practice of halogenation plants, in our own words.
std::string caution_text() {
  std::string out = "Cautions (screening figures for gas-phase steps; not a safety assessment)\n";
  for (const char* line : {
           "- F2, Cl2 and Br2 are toxic and oxidising. Their mixtures with hydrogen or organic vapour can ignite or "
           "explode, "
           "also by light alone.",
           "- Every turn of a chain releases its net enthalpy. Feed the halogen as fast as it is used up, keep the "
           "hold-up "
           "small, prove the cooling; an inhibited or dark batch collects halogen and then reacts at once.",
           "- Each mole of X2 makes one mole of HX gas (about 24 L at 25 °C): size vent and absorber, prevent "
           "suck-back.",
           "- Strong UV and visible lamps harm eyes and skin; interlock lamp, stirring, cooling and feed.",
           "- Peroxide and azo initiators decompose by themselves, air forms further peroxides: keep cold, dose in "
           "portions, "
           "purge with nitrogen.",
           "- Local codes, the safety data sheets and qualified people decide, not these figures.",
       }) {
    std::string block = wrapped(line, 118, "  ");
    block.erase(0, 2);
    out += block;
  }
  return out;
}

}  // namespace halostep
