#include "convert.hpp"

#include <openbabel/atom.h>
#include <openbabel/bond.h>
#include <openbabel/generic.h>
#include <openbabel/mol.h>
#include <openbabel/obiter.h>
#include <openbabel/ring.h>
#include <openbabel/stereo/cistrans.h>
#include <openbabel/stereo/stereo.h>
#include <openbabel/stereo/tetrahedral.h>

#include <algorithm>
#include <fmt/format.h>

#include "molecule_build.hpp"
#include "valence.hpp"

namespace halostep {
namespace {

using OpenBabel::OBAtom;
using OpenBabel::OBBond;
using OpenBabel::OBStereo;

// Ordinary hydrogens become counts; of H2 and of a lone H one atom stays.
bool folded(OBAtom& a) {
  if (a.GetAtomicNum() != 1 || a.GetIsotope() != 0 || a.GetFormalCharge() != 0 || a.GetExplicitDegree() != 1) return false;
  OBAtom* other = nullptr;
  FOR_NBORS_OF_ATOM(n, &a) other = &*n;
  if (other == nullptr || other->GetBond(&a)->GetBondOrder() != 1) return false;
  return other->GetAtomicNum() != 1 || other->GetIsotope() != 0 || a.GetIdx() > other->GetIdx();
}

// Electrons without a partner: what is missing to the next allowed valence.
int unpaired_electrons(const Atom& a, int valence) {
  const int* allowed = allowed_valences(a.element, a.charge);
  if (allowed == nullptr) return 0;
  for (const int* p = allowed; *p != 0; ++p) {
    if (*p >= valence) return *p - valence;
  }
  return 0;
}

// In rings of fewer than eight members cis is all there is, so a double bond there takes no descriptor
// (IUPAC Recommendations 2013, P-93.5.1.4; from memory).
bool small_ring(OBBond& bond) {
  const auto* ring = bond.IsInRing() ? bond.FindSmallestRing() : nullptr;
  return ring != nullptr && ring->Size() < 8;
}

void read_stereo(OpenBabel::OBMol& mol, const std::vector<int>& to, const std::vector<Bond>& bonds,
                 std::vector<TetrahedralStereo>& tetrahedral, std::vector<DoubleBondStereo>& doubles) {
  const auto atom_of = [&](unsigned long id) {
    if (id == OBStereo::ImplicitRef) return -1;
    const auto* a = mol.GetAtomById(id);
    return a == nullptr ? -1 : to[a->GetIdx() - 1];
  };
  for (auto* d : mol.GetAllData(OpenBabel::OBGenericDataType::StereoData)) {
    const auto type = static_cast<OpenBabel::OBStereoBase*>(d)->GetType();
    if (type == OBStereo::Tetrahedral) {
      auto* ts = static_cast<OpenBabel::OBTetrahedralStereo*>(d);
      const auto c = ts->GetConfig(OBStereo::Clockwise, OBStereo::ViewFrom);
      if (!ts->IsValid() || !c.specified || c.winding == OBStereo::UnknownWinding || c.refs.size() != 3) continue;
      TetrahedralStereo t;
      t.centre = atom_of(c.center);
      t.neighbours[0] = atom_of(c.from);
      for (std::size_t k = 0; k < 3; ++k) t.neighbours[k + 1] = atom_of(c.refs[k]);
      t.clockwise = true;
      if (t.centre >= 0) tetrahedral.push_back(t);
    } else if (type == OBStereo::CisTrans) {
      auto* cs = static_cast<OpenBabel::OBCisTransStereo*>(d);
      const auto c = cs->GetConfig(OBStereo::ShapeU);
      if (!cs->IsValid() || !c.specified || c.refs.size() != 4) continue;
      auto *begin = mol.GetAtomById(c.begin), *end = mol.GetAtomById(c.end);
      auto* bond = begin == nullptr || end == nullptr ? nullptr : mol.GetBond(begin, end);
      if (bond == nullptr || small_ring(*bond)) continue;
      // ShapeU: refs run begin, begin, end, end around the bond, so 0 and 3 lie on one side, 1 and 2 on the other.
      const int a = atom_of(c.begin), b = atom_of(c.end);
      const int ra[2] = {atom_of(c.refs[0]), atom_of(c.refs[1])}, rb[2] = {atom_of(c.refs[3]), atom_of(c.refs[2])};
      const int ia = ra[0] >= 0 ? 0 : 1, ib = rb[0] >= 0 ? 0 : 1;
      if (ra[ia] < 0 || rb[ib] < 0) continue;
      for (std::size_t k = 0; k < bonds.size(); ++k) {
        const bool forward = bonds[k].a == a && bonds[k].b == b;
        if (forward) doubles.push_back({static_cast<int>(k), ra[ia], rb[ib], ia == ib});
        else if (bonds[k].a == b && bonds[k].b == a) doubles.push_back({static_cast<int>(k), rb[ib], ra[ia], ia == ib});
      }
    }
  }
}

// N(=O)=O written with five bonds becomes the charge-separated nitro group.
void normalise_nitro(std::vector<Atom>& atoms, std::vector<Bond>& bonds) {
  for (std::size_t i = 0; i < atoms.size(); ++i) {
    if (atoms[i].element != element::N || atoms[i].charge != 0) continue;
    std::vector<std::size_t> oxo;
    int others = 0;
    for (std::size_t k = 0; k < bonds.size(); ++k) {
      const auto& b = bonds[k];
      if (b.a != static_cast<int>(i) && b.b != static_cast<int>(i)) continue;
      const auto& o = atoms[static_cast<std::size_t>(b.a == static_cast<int>(i) ? b.b : b.a)];
      if (b.order == BondOrder::dbl && o.element == element::O && o.charge == 0) oxo.push_back(k);
      else ++others;
    }
    if (oxo.size() != 2 || others != 1) continue;
    auto& b = bonds[oxo[1]];
    b.order = BondOrder::single;
    atoms[i].charge = 1;
    atoms[static_cast<std::size_t>(b.a == static_cast<int>(i) ? b.b : b.a)].charge = -1;
  }
}

// [O][O] is dioxygen, whose usual text is O=O.
void normalise_dioxygen(std::vector<Atom>& atoms, std::vector<Bond>& bonds) {
  const auto open_oxygen = [](const Atom& a) { return a.element == element::O && a.unpaired == 1 && a.charge == 0 && a.hydrogens == 0; };
  if (atoms.size() != 2 || bonds.size() != 1 || !open_oxygen(atoms[0]) || !open_oxygen(atoms[1])) return;
  bonds[0].order = BondOrder::dbl;
  atoms[0].unpaired = atoms[1].unpaired = 0;
}

bool nonmetal(int z) {
  static constexpr int kKnown[] = {1, 5, 6, 7, 8, 9, 14, 15, 16, 17, 32, 33, 34, 35, 53};
  return std::find(std::begin(kKnown), std::end(kKnown), z) != std::end(kKnown);
}

// Radical centres pass for saturated while rings are judged: phenyl is as aromatic as benzene. False: there are none.
bool judge_with_radicals(OpenBabel::OBMol& mol) {
  std::vector<std::pair<OBAtom*, unsigned>> saturated;
  FOR_ATOMS_OF_MOL(a, mol) {
    Atom like;
    like.element = static_cast<std::uint8_t>(a->GetAtomicNum());
    like.charge = static_cast<std::int8_t>(a->GetFormalCharge());
    const unsigned h = a->GetImplicitHCount();
    if (unpaired_electrons(like, static_cast<int>(a->GetExplicitValence() + h)) != 1) continue;
    saturated.emplace_back(&*a, h);
    a->SetImplicitHCount(h + 1);
  }
  if (saturated.empty()) return false;
  mol.SetAromaticPerceived(false);
  (void)mol.GetAtom(1)->IsAromatic();
  for (const auto& [a, h] : saturated) a->SetImplicitHCount(h);
  return true;
}

// The parser's search costs as much as all its reading; plain rings need none.
void judge_rings(OpenBabel::OBMol& mol, const std::vector<int>& to, Molecule& m) {
  mol.SetAromaticPerceived(false);
  for (unsigned i = 1; i <= mol.NumAtoms(); ++i) {
    if (to[i - 1] >= 0) MoleculeBuild::atom(m, to[i - 1]).aromatic = mol.GetAtom(static_cast<int>(i))->IsAromatic();
  }
  int k = 0;
  for (unsigned i = 0; i < mol.NumBonds(); ++i) {
    auto& ob = *mol.GetBond(static_cast<int>(i));
    if (to[ob.GetBeginAtomIdx() - 1] < 0 || to[ob.GetEndAtomIdx() - 1] < 0) continue;
    if (ob.IsAromatic()) MoleculeBuild::bond(m, k).order = BondOrder::aromatic;
    ++k;
  }
}

}  // namespace

Result<Molecule> convert(OpenBabel::OBMol& mol, std::vector<int>* source_atom, bool as_written) {
  const bool judged = judge_with_radicals(mol) || !as_written;
  const auto n = mol.NumAtoms();
  std::vector<Atom> atoms;
  std::vector<Bond> bonds;
  std::vector<int> to(n, -1), source, valence;
  atoms.reserve(n);
  source.reserve(n);
  valence.reserve(n);
  bonds.reserve(mol.NumBonds());
  for (unsigned i = 1; i <= n; ++i) {
    auto& ob = *mol.GetAtom(static_cast<int>(i));
    if (folded(ob)) continue;
    Atom a;
    a.element = static_cast<std::uint8_t>(ob.GetAtomicNum());
    a.charge = static_cast<std::int8_t>(ob.GetFormalCharge());
    a.isotope = static_cast<std::uint16_t>(ob.GetIsotope());
    a.aromatic = judged && ob.IsAromatic();
    a.hydrogens = static_cast<std::uint8_t>(ob.GetImplicitHCount());
    to[i - 1] = static_cast<int>(atoms.size());
    source.push_back(static_cast<int>(i) - 1);
    valence.push_back(static_cast<int>(ob.GetExplicitValence() + ob.GetImplicitHCount()));
    atoms.push_back(a);
  }
  for (unsigned k = 0; k < mol.NumBonds(); ++k) {
    auto& ob = *mol.GetBond(static_cast<int>(k));
    const int a = to[ob.GetBeginAtomIdx() - 1], b = to[ob.GetEndAtomIdx() - 1];
    if (a < 0 || b < 0) {
      if (a >= 0 || b >= 0) ++atoms[static_cast<std::size_t>(std::max(a, b))].hydrogens;
      continue;
    }
    const auto order = judged && ob.IsAromatic() ? BondOrder::aromatic : static_cast<BondOrder>(std::clamp(static_cast<int>(ob.GetBondOrder()), 1, 3));
    bonds.push_back({a, b, order, false});
  }
  for (std::size_t i = 0; i < atoms.size(); ++i) {
    const auto& a = atoms[i];
    atoms[i].unpaired = static_cast<std::uint8_t>(std::clamp(unpaired_electrons(a, valence[i]), 0, 4));
  }
  std::vector<TetrahedralStereo> tetrahedral;
  std::vector<DoubleBondStereo> doubles;
  read_stereo(mol, to, bonds, tetrahedral, doubles);
  normalise_nitro(atoms, bonds);
  normalise_dioxygen(atoms, bonds);
  if (source_atom != nullptr) *source_atom = std::move(source);
  auto m = MoleculeBuild::graph(std::move(atoms), std::move(bonds), std::move(tetrahedral), std::move(doubles));
  if (!m.ok()) return m;
  if (!judged) {
    // Plain rings were just read off a Kekule form.
    if (mark_plain_rings(m.value())) {
      if (auto e = check_valences(m.value())) return *e;
      return m;
    }
    judge_rings(mol, to, m.value());
  }
  if (auto e = check_graph(m.value())) return *e;
  return m;
}

std::optional<Error> uncovered_element(const Molecule& m) {
  for (int i = 0; i < m.atom_count(); ++i) {
    const int z = m.atom(i).element;
    if (nonmetal(z)) continue;
    const bool noble = z == 2 || z == 10 || z == 18 || z == 36 || z == 54 || z == 86;
    return Error{noble ? ErrorClass::domain : ErrorClass::metal,
                 fmt::format("{} is {}: outside the domain", element_symbol(z), noble ? "a noble gas" : "a metal"),
                 fmt::format("atom {}", i + 1)};
  }
  return std::nullopt;
}

std::optional<Error> check_mode(const Molecule& m, ParseMode mode) {
  const auto atom = [](int i) { return fmt::format("atom {}", i + 1); };
  if (m.fragment_count() > 1) {
    return Error{ErrorClass::fragments,
                 fmt::format("{} separate parts where one molecule is meant", m.fragment_count()), {}};
  }
  if (mode == ParseMode::substrate) {
    if (auto e = uncovered_element(m)) return e;
  }
  if (m.charge() != 0) {
    int charged = 0;  // the first atom whose sign is that of the whole
    while (m.atom(charged).charge * m.charge() <= 0) ++charged;
    return Error{ErrorClass::ion, fmt::format("an ion of charge {:+d} is outside the domain", m.charge()),
                 atom(charged)};
  }
  if (mode == ParseMode::substrate) {
    for (int i = 0; i < m.atom_count(); ++i) {
      if (m.atom(i).unpaired > 0) {
        return Error{ErrorClass::radical, "a radical is no substrate; it may stand in a reaction", atom(i)};
      }
    }
  }
  return std::nullopt;
}

}  // namespace halostep
