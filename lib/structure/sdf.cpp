#include <fmt/format.h>
#include <openbabel/atom.h>
#include <openbabel/bond.h>
#include <openbabel/elements.h>
#include <openbabel/generic.h>
#include <openbabel/mol.h>
#include <openbabel/ring.h>
#include <openbabel/stereo/cistrans.h>
#include <openbabel/stereo/stereo.h>

#include <algorithm>
#include <charconv>
#include <cmath>
#include <mutex>
#include <streambuf>

#include "convert.hpp"
#include "halostep/structure.hpp"
#include "mol_fields.hpp"
#include "mol_record.hpp"
#include "parser.hpp"

namespace halostep {
namespace {

constexpr std::size_t kMaxTitle = 200;  // bytes; the format itself allows 80

// The text of one record, its line ends made LF.
struct RecordText {
  std::string title, text;
  std::size_t bytes = 0;
  bool ended = false;  // by "$$$$"
  bool blank = true;
};

// Reads a line without its end (LF, CRLF or CR), at most `limit` bytes of it; false at the end of the stream.
bool read_line(std::streambuf& in, std::string& line, std::size_t limit) {
  line.clear();
  int c = in.sbumpc();
  if (c == std::char_traits<char>::eof()) return false;
  for (; c != std::char_traits<char>::eof() && c != '\n' && c != '\r'; c = in.sbumpc()) {
    if (line.size() < limit) line.push_back(static_cast<char>(c));
  }
  if (c == '\r' && in.sgetc() == '\n') in.sbumpc();
  return true;
}

RecordText read_record(std::streambuf& in) {
  RecordText out;
  std::string line;
  for (bool first = true; read_line(in, line, kMaxRecordText + 1); first = false) {
    if (line.starts_with("$$$$")) {
      out.ended = true;
      break;
    }
    const auto shown = column(line, 0, line.size());
    if (first) out.title = shown.substr(0, kMaxTitle);
    out.blank = out.blank && shown.empty();
    out.bytes += line.size() + 1;
    if (out.bytes <= kMaxRecordText) (out.text += line) += '\n';
  }
  return out;
}

std::vector<std::string_view> lines_of(std::string_view text) {
  std::vector<std::string_view> out;
  while (!text.empty()) {
    const auto end = text.find('\n');
    out.push_back(text.substr(0, end));
    text.remove_prefix(end + 1);
  }
  return out;
}

// Where the coordinates lie: the parser finds stereo in the plane or in space, or none.
const char* dimension(const MolRecord& record) {
  const auto any = [&](auto&& test) { return std::any_of(record.atoms.begin(), record.atoms.end(), test); };
  if (any([](const MolAtom& a) { return a.z != 0; })) return "3D";
  return any([](const MolAtom& a) { return a.x != 0 || a.y != 0; }) ? "2D" : "0D";
}

std::string v2000_text(const MolRecord& record) {
  std::string out =
      fmt::format("{:3}{:3}  0  0  0  0  0  0  0  0999 V2000\n", record.atoms.size(), record.bonds.size());
  std::string properties;
  int number = 0;
  for (const auto& a : record.atoms) {
    ++number;
    out += fmt::format("{:10.4f}{:10.4f}{:10.4f} {:<3} 0  0  0  0  0  0  0  0  0  0  0  0\n", a.x, a.y, a.z, a.symbol);
    const auto put = [&](const char* name, int value) {
      if (value != 0) properties += fmt::format("M  {}  1{:4}{:4}\n", name, number, value);
    };
    put("CHG", a.charge);
    put("RAD", a.radical);
    put("ISO", a.isotope);
  }
  for (const auto& b : record.bonds) {
    const int stereo = b.type != 1                ? 0
                       : b.drawn == Drawn::up     ? 1
                       : b.drawn == Drawn::down   ? 6
                       : b.drawn == Drawn::either ? 4
                                                  : 0;
    out += fmt::format("{:3}{:3}{:3}{:3}\n", b.a + 1, b.b + 1, b.type, stereo);
  }
  return out + properties;
}

std::string v3000_text(const MolRecord& record) {
  std::string out = fmt::format(
      "  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nM  V30 COUNTS {} {} 0 0 0\nM  V30 BEGIN ATOM\n",
      record.atoms.size(), record.bonds.size());
  int number = 0;
  for (const auto& a : record.atoms) {
    out += fmt::format("M  V30 {} {} {:.4f} {:.4f} {:.4f} 0", ++number, a.symbol, a.x, a.y, a.z);
    if (a.charge != 0) out += fmt::format(" CHG={}", a.charge);
    if (a.radical != 0) out += fmt::format(" RAD={}", a.radical);
    if (a.isotope != 0) out += fmt::format(" MASS={}", a.isotope);
    out += '\n';
  }
  out += "M  V30 END ATOM\nM  V30 BEGIN BOND\n";
  number = 0;
  for (const auto& b : record.bonds) {
    out += fmt::format("M  V30 {} {} {} {}", ++number, b.type, b.a + 1, b.b + 1);
    if (b.type == 1 && b.drawn != Drawn::plain) out += fmt::format(" CFG={}", static_cast<int>(b.drawn));
    out += '\n';
  }
  return out + "M  V30 END BOND\nM  V30 END CTAB\n";
}

// V2000 has three columns for the numbers of atoms and bonds.
bool needs_v3000(const MolRecord& record) {
  constexpr std::size_t kLargest = 999;
  return record.atoms.size() > kLargest || record.bonds.size() > kLargest;
}

std::string write_record(const MolRecord& record) {
  return fmt::format("\n{:20}{}\n\n{}M  END\n", "", dimension(record),
                     needs_v3000(record) ? v3000_text(record) : v2000_text(record));
}

// "atom 5" of an error becomes the line it stands on.
Error placed(Error e, const MolRecord& record, const std::vector<int>& source) {
  const bool of_atom = e.place.starts_with("atom ");
  std::size_t k = 0;
  if (of_atom) std::from_chars(e.place.data() + 5, e.place.data() + e.place.size(), k);
  e.place.clear();
  if (of_atom && k >= 1 && k <= source.size()) {
    e.place = fmt::format("line {}", record.atoms[static_cast<std::size_t>(source[k - 1])].line);
  }
  return e;
}

// The parser takes every double bond as cis or trans where there are coordinates. Not meant so: bonds drawn "either",
// and rings of fewer than eight members, where cis is all there is (IUPAC Recommendations 2013, P-93.5.1.4; from
// memory).
void drop_unmeant_stereo(OpenBabel::OBMol& mol, const MolRecord& record) {
  std::vector<OpenBabel::OBGenericData*> unmeant;
  for (auto* d : mol.GetAllData(OpenBabel::OBGenericDataType::StereoData)) {
    if (static_cast<OpenBabel::OBStereoBase*>(d)->GetType() != OpenBabel::OBStereo::CisTrans) continue;
    const auto c = static_cast<OpenBabel::OBCisTransStereo*>(d)->GetConfig();
    auto *begin = mol.GetAtomById(c.begin), *end = mol.GetAtomById(c.end);
    auto* bond = begin == nullptr || end == nullptr ? nullptr : mol.GetBond(begin, end);
    if (bond == nullptr) continue;
    const bool either = record.bonds[bond->GetIdx()].drawn == Drawn::either;
    const auto* ring = bond->IsInRing() ? bond->FindSmallestRing() : nullptr;
    if (either || (ring != nullptr && ring->Size() < 8)) unmeant.push_back(d);
  }
  for (auto* d : unmeant) mol.DeleteData(d);
}

void set_valences(OpenBabel::OBMol& mol, const MolRecord& record) {
  for (std::size_t k = 0; k < record.atoms.size(); ++k) {
    const int v = record.atoms[k].valence;
    auto* a = mol.GetAtom(static_cast<int>(k) + 1);
    if (v >= 0) a->SetImplicitHCount(static_cast<unsigned>(std::max(0, v - static_cast<int>(a->GetExplicitValence()))));
  }
}

// The mass difference of old files counts from the rounded atomic weight.
void set_isotopes(MolRecord& record) {
  for (auto& a : record.atoms) {
    if (a.mass_difference == 0 || a.isotope != 0) continue;
    const double weight = OpenBabel::OBElements::GetMass(static_cast<unsigned>(element_number(a.symbol)));
    a.isotope = static_cast<int>(std::lround(weight)) + a.mass_difference;
  }
}

Result<Molecule> parse_mol(const std::string& text, ParseMode mode) {
  MolRecord record = read_mol_record(lines_of(text));
  if (record.error) return *record.error;
  // The parser misreads these in V3000.
  if (needs_v3000(record) &&
      std::any_of(record.bonds.begin(), record.bonds.end(), [](const MolBond& b) { return b.type == 4; })) {
    return Error{ErrorClass::aromaticity, "bond type 4 in a record this large: write single and double bonds", {}};
  }
  std::vector<int> source;
  Result<Molecule> m = Error{};
  {
    const std::lock_guard guard(parser_lock());
    auto& p = parser();
    OpenBabel::OBMol mol;
    set_isotopes(record);
    if (!p.read_mol(mol, write_record(record)) || mol.NumAtoms() != record.atoms.size() ||
        mol.NumBonds() != record.bonds.size()) {
      return Error{ErrorClass::syntax, "not readable as a MOL record", {}};
    }
    if (p.log().find("kekul") != std::string::npos) {
      return Error{ErrorClass::aromaticity, "no Kekule form for the aromatic system", {}};
    }
    set_valences(mol, record);
    drop_unmeant_stereo(mol, record);
    m = convert(mol, &source);
  }
  if (!m.ok()) return placed(m.error(), record, source);
  if (auto e = check_mode(m.value(), mode)) return placed(*e, record, source);
  return m;
}

Result<Molecule> parse_record(const RecordText& record, ParseMode mode) {
  if (record.bytes > kMaxRecordText)
    return Error{
        ErrorClass::too_long, fmt::format("{} bytes; the limit of a record is {}", record.bytes, kMaxRecordText), {}};
  if (record.blank) return Error{ErrorClass::empty, "no structure", {}};
  return parse_mol(record.text, mode);
}

}  // namespace

struct SdfReader::Impl {
  std::istream& in;
  ParseMode mode;
  int number = 0;
  bool done = false;
};

SdfReader::SdfReader(std::istream& in, ParseMode mode) : impl_(new Impl{in, mode}) {}
SdfReader::~SdfReader() = default;

std::optional<SdfRecord> SdfReader::next() {
  auto* buffer = impl_->in.rdbuf();
  if (impl_->done || buffer == nullptr) return std::nullopt;
  const RecordText record = read_record(*buffer);
  impl_->done = !record.ended;
  if (impl_->done && record.blank) return std::nullopt;
  SdfRecord out{++impl_->number, record.title, parse_record(record, impl_->mode)};
  if (!out.molecule.ok()) {
    Error e = out.molecule.error();
    e.place = fmt::format("record {}{}{}", out.number, e.place.empty() ? "" : ", ", e.place);
    out.molecule = std::move(e);
  }
  return out;
}

}  // namespace halostep
