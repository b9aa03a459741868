#include "outcome/notes.hpp"

namespace halostep {
namespace {

struct Groups {
  bool olefin = false, alkyne = false, arene = false, oh = false, nh = false, sh = false, sih = false, amine = false,
       sulfide = false, small_ring = false, bromide_or_iodide = false;
};

Groups groups(const Analysis& a) {
  Groups g;
  const auto& m = a.plain();
  for (int i = 0; i < m.bond_count(); ++i) {
    const auto& b = m.bond(i);
    const bool carbons = m.atom(b.a).element == element::C && m.atom(b.b).element == element::C;
    g.olefin |= carbons && b.order == BondOrder::dbl;
    g.alkyne |= carbons && b.order == BondOrder::triple;
    g.arene |= b.order == BondOrder::aromatic;
  }
  for (int i = 0; i < m.atom_count(); ++i) {
    const auto& at = m.atom(i);
    const bool h = at.hydrogens > 0;
    g.oh |= at.element == element::O && h;
    g.nh |= at.element == element::N && h;
    g.sh |= at.element == element::S && h;
    g.sih |= at.element == element::Si && h;
    g.amine |= at.element == element::N && !at.aromatic && at.charge == 0 && a.info()[static_cast<std::size_t>(i)].hybrid == Hybrid::sp3;
    g.sulfide |= at.element == element::S && !h && m.degree(i) == 2 && !at.aromatic;
    g.small_ring |= at.element == element::C && a.info()[static_cast<std::size_t>(i)].ring == 3;
    g.bromide_or_iodide |= at.element == element::Br || at.element == element::I;
  }
  return g;
}

}  // namespace

std::vector<std::string> competing_channels(const Analysis& a, Halogen x) {
  const auto g = groups(a);
  std::vector<std::string> out;
  if (g.olefin || g.alkyne) out.push_back("addition to the multiple C-C bond competes and may outrun abstraction; not in the shares");
  if (g.arene) out.push_back("attack on the aromatic ring (addition, ionic substitution in the dark or with a Lewis acid) competes; not in the shares");
  if (g.oh || g.nh || g.sh || g.sih) {
    std::string bonds;
    for (const auto& [has, name] : {std::pair(g.oh, "O-H"), std::pair(g.nh, "N-H"), std::pair(g.sh, "S-H"), std::pair(g.sih, "Si-H")}) {
      if (has) bonds += (bonds.empty() ? "" : ", ") + std::string(name);
    }
    out.push_back("attack on " + bonds + " competes; the shares are over C-H sites only");
  }
  if (g.amine) out.push_back("the amine nitrogen takes up the hydrogen halide and the halogen; the free-amine figures then no longer hold");
  if (g.sulfide) out.push_back("halogen adds to the sulfide sulfur first");
  if (g.small_ring) out.push_back("a cyclopropylmethyl radical opens to the homoallyl radical; products may differ from the site attacked");
  if (g.bromide_or_iodide) out.push_back("a radical beside C-Br or C-I may lose the halogen atom");
  if (g.bromide_or_iodide && x == Halogen::Br) {
    out.push_back("a bromine on the next carbon helps bromine atoms to attack there (Thaler, J. Am. Chem. Soc. 1963, 85, 2607); not in the shares");
  }
  if (a.deuterium_count() > 0) {
    out.push_back("no data for bonds to D and T: the shares leave them out, and the C-H have the figures of the unlabelled molecule");
  }
  if (x == Halogen::F) out.push_back("F2 attacks without initiation and the heat of one turn exceeds a C-C bond: fragmentation and fire are the rule without dilution and cooling");
  if (x == Halogen::I) out.push_back("abstraction by I is far uphill and HI reduces the iodide: the chain does not carry itself");
  return out;
}

}  // namespace halostep
