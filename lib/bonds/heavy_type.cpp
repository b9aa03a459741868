#include "heavy_type.hpp"

#include <algorithm>

#include "features.hpp"
#include "locate.hpp"

namespace halostep {
namespace {

std::string pair_text(const Molecule& m, const HeavyBond& b) {
  return std::string(element_symbol(m.atom(b.centre).element)) + '-' + element_symbol(m.atom(b.partner).element);
}

// The carbon is called as in the parent with hydrogen instead of the halogen.
std::string carbon_type(const Analysis& a, const HeavyBond& b, const std::string& pair) {
  const int gone = a.to_plain(b.partner), centre = a.to_plain(b.centre);
  const auto parent = parent_of_halide(a.plain(), gone);
  if (!parent.ok()) return pair;
  const Analysis pa(parent.value(), false);
  std::string type(site_type(pa.plain(), pa.info(), centre - (centre > gone)));
  if (type == "methane C-H") type = "methyl C-H";
  const auto at = type.find("C-H");
  return at == std::string::npos ? pair : type.replace(at, 3, pair);
}

std::string sulfur_name(const Molecule& m, int sulfur) {
  const auto n = m.neighbours(sulfur);
  const auto oxo = std::count_if(n.begin(), n.end(), [&](const Neighbour& q) {
    return m.atom(q.atom).element == element::O && m.bond(q.bond).order == BondOrder::dbl;
  });
  return oxo >= 2 ? "sulfonyl" : oxo == 1 ? "sulfinyl" : "sulfenyl";
}

// Nitrite, nitrate, or neither (hydroxylamine, oxime).
std::string oxygen_nitrogen_name(const Molecule& m, int nitrogen) {
  const auto n = m.neighbours(nitrogen);
  const auto bare = std::count_if(n.begin(), n.end(), [&](const Neighbour& q) {
    return m.atom(q.atom).element == element::O && m.degree(q.atom) == 1 && m.atom(q.atom).hydrogens == 0;
  });
  return bare >= 2 ? "nitrate " : bare == 1 ? "nitrite " : "";
}

}  // namespace

std::string heavy_type(const Analysis& a, const HeavyBond& bond) {
  const auto& m = a.original();
  const std::string pair = pair_text(m, bond);
  const int c = m.atom(bond.centre).element, p = m.atom(bond.partner).element;
  if (is_halogen(c) && is_halogen(p)) return (c == p ? "halogen " : "interhalogen ") + pair;
  if (c == element::C && is_halogen(p)) return carbon_type(a, bond, pair);
  const int other = is_halogen(c) ? p : c, at = is_halogen(c) ? bond.partner : bond.centre;
  if (is_halogen(c) || is_halogen(p)) {
    switch (other) {
      case element::Si: return "silyl " + pair;
      case element::N: return "N-halo " + pair;
      case element::O: return "hypohalite " + pair;
      case element::S: return sulfur_name(m, at) + ' ' + pair;
      default: return pair;
    }
  }
  if (c == element::O && p == element::O) return "peroxide " + pair;
  if (c == element::S && p == element::S) return "disulfide " + pair;
  if ((c == element::O && p == element::N) || (c == element::N && p == element::O))
    return oxygen_nitrogen_name(m, c == element::N ? bond.centre : bond.partner) + pair;
  if (c == element::N || p == element::N) return "azo " + pair;
  return pair;
}

}  // namespace halostep
