#include <array>
#include <cctype>
#include <map>
#include <string>

#include "halostep/molecule.hpp"

namespace halostep {
namespace {

constexpr std::array<const char*, 119> kSymbols = {
    "?",  "H",  "He", "Li", "Be", "B",  "C",  "N",  "O",  "F",  "Ne", "Na", "Mg", "Al", "Si", "P",  "S",  "Cl", "Ar", "K",
    "Ca", "Sc", "Ti", "V",  "Cr", "Mn", "Fe", "Co", "Ni", "Cu", "Zn", "Ga", "Ge", "As", "Se", "Br", "Kr", "Rb", "Sr", "Y",
    "Zr", "Nb", "Mo", "Tc", "Ru", "Rh", "Pd", "Ag", "Cd", "In", "Sn", "Sb", "Te", "I",  "Xe", "Cs", "Ba", "La", "Ce", "Pr",
    "Nd", "Pm", "Sm", "Eu", "Gd", "Tb", "Dy", "Ho", "Er", "Tm", "Yb", "Lu", "Hf", "Ta", "W",  "Re", "Os", "Ir", "Pt", "Au",
    "Hg", "Tl", "Pb", "Bi", "Po", "At", "Rn", "Fr", "Ra", "Ac", "Th", "Pa", "U",  "Np", "Pu", "Am", "Cm", "Bk", "Cf", "Es",
    "Fm", "Md", "No", "Lr", "Rf", "Db", "Sg", "Bh", "Hs", "Mt", "Ds", "Rg", "Cn", "Nh", "Fl", "Mc", "Lv", "Ts", "Og"};

// Abridged standard atomic weights, Prohaska et al. (IUPAC), Pure Appl. Chem. 2022, 94, 573; from memory.
double weight(int z, int isotope) {
  if (isotope != 0) return z == element::H && isotope == 2 ? 2.01410 : z == element::H && isotope == 3 ? 3.01605 : isotope;
  switch (z) {
    case 1: return 1.0080;
    case 5: return 10.81;
    case 6: return 12.011;
    case 7: return 14.007;
    case 8: return 15.999;
    case 9: return 18.998;
    case 14: return 28.085;
    case 15: return 30.974;
    case 16: return 32.06;
    case 17: return 35.45;
    case 32: return 72.630;
    case 33: return 74.922;
    case 34: return 78.971;
    case 35: return 79.904;
    case 50: return 118.71;
    case 53: return 126.90;
    default: return 0.0;
  }
}

}  // namespace

const char* element_symbol(int z) noexcept { return z >= 1 && z <= 118 ? kSymbols[static_cast<std::size_t>(z)] : "?"; }

int element_number(std::string_view symbol) noexcept {
  if (symbol.empty() || symbol.size() > 2) return 0;
  const char first = static_cast<char>(std::toupper(static_cast<unsigned char>(symbol[0])));
  for (std::size_t z = 1; z < kSymbols.size(); ++z) {
    const std::string_view s = kSymbols[z];
    if (s.size() == symbol.size() && s[0] == first && (s.size() == 1 || s[1] == symbol[1])) return static_cast<int>(z);
  }
  return 0;
}

std::string formula(const Molecule& m) {
  std::map<std::string, int> n;
  for (int i = 0; i < m.atom_count(); ++i) {
    const auto& a = m.atom(i);
    n[a.element == element::H && a.isotope == 2 ? "D" : a.element == element::H && a.isotope == 3 ? "T" : element_symbol(a.element)] += 1;
    if (a.hydrogens > 0) n["H"] += a.hydrogens;
  }
  std::string out;
  const auto put = [&](const std::string& s) {
    const auto it = n.find(s);
    if (it == n.end()) return;
    out += s + (it->second > 1 ? std::to_string(it->second) : "");
    n.erase(it);
  };
  // Hill order: C, H, then the alphabet; without carbon the alphabet alone (Hill, J. Am. Chem. Soc. 1900, 22, 478).
  if (n.contains("C")) {
    put("C");
    put("H");
  }
  while (!n.empty()) put(std::string(n.begin()->first));
  return out;
}

double molar_mass(const Molecule& m) {
  double sum = 0;
  for (int i = 0; i < m.atom_count(); ++i) sum += weight(m.atom(i).element, m.atom(i).isotope) + m.atom(i).hydrogens * weight(1, 0);
  return sum;
}

}  // namespace halostep
