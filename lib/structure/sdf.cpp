#include <fmt/format.h>
#include <openbabel/atom.h>
#include <openbabel/bond.h>
#include <openbabel/generic.h>
#include <openbabel/mol.h>
#include <openbabel/ring.h>
#include <openbabel/stereo/cistrans.h>
#include <openbabel/stereo/stereo.h>

#include <algorithm>
#include <charconv>
#include <mutex>
#include <streambuf>

#include "convert.hpp"
#include "halostep/structure.hpp"
#include "mol_check.hpp"
#include "mol_fields.hpp"
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

// Reads a line without its end, at most `limit` bytes of it; false at the end of the stream.
bool read_line(std::streambuf& in, std::string& line, std::size_t limit) {
  line.clear();
  int c = in.sbumpc();
  if (c == std::char_traits<char>::eof()) return false;
  for (; c != std::char_traits<char>::eof() && c != '\n'; c = in.sbumpc()) {
    if (line.size() < limit) line.push_back(static_cast<char>(c));
  }
  if (line.ends_with('\r')) line.pop_back();
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

// "atom 5" of an error becomes the line it stands on.
Error placed(Error e, const std::vector<int>& line, const std::vector<int>& source) {
  const bool of_atom = e.place.starts_with("atom ");
  std::size_t k = 0;
  if (of_atom) std::from_chars(e.place.data() + 5, e.place.data() + e.place.size(), k);
  e.place.clear();
  if (of_atom && k >= 1 && k <= source.size())
    e.place = fmt::format("line {}", line[static_cast<std::size_t>(source[k - 1])]);
  return e;
}

// Coordinates make every double bond cis or trans: not where the file says "either", nor in small rings, where cis is
// all there is (IUPAC 2013 Recommendations, P-93.5.1.4: rings of fewer than eight members take no descriptor; from
// memory).
void drop_unmeant_stereo(OpenBabel::OBMol& mol, const std::vector<int>& either) {
  std::vector<OpenBabel::OBGenericData*> unmeant;
  for (auto* d : mol.GetAllData(OpenBabel::OBGenericDataType::StereoData)) {
    if (static_cast<OpenBabel::OBStereoBase*>(d)->GetType() != OpenBabel::OBStereo::CisTrans) continue;
    const auto c = static_cast<OpenBabel::OBCisTransStereo*>(d)->GetConfig();
    auto* begin = mol.GetAtomById(c.begin);
    auto* end = mol.GetAtomById(c.end);
    auto* bond = begin == nullptr || end == nullptr ? nullptr : mol.GetBond(begin, end);
    if (bond == nullptr) continue;
    const bool meant_either = std::find(either.begin(), either.end(), static_cast<int>(bond->GetIdx())) != either.end();
    const auto* ring = bond->IsInRing() ? bond->FindSmallestRing() : nullptr;
    if (meant_either || (ring != nullptr && ring->Size() < 8)) unmeant.push_back(d);
  }
  for (auto* d : unmeant) mol.DeleteData(d);
}

void set_valences(OpenBabel::OBMol& mol, const std::vector<std::pair<int, int>>& valence) {
  for (const auto& [index, v] : valence) {
    auto* a = mol.GetAtom(index + 1);
    a->SetImplicitHCount(static_cast<unsigned>(std::max(0, v - static_cast<int>(a->GetExplicitValence()))));
  }
}

Result<Molecule> parse_mol(const std::string& text, ParseMode mode) {
  const MolCheck check = check_mol(lines_of(text));
  if (check.error) return *check.error;
  std::vector<int> source;
  Result<Molecule> m = Error{};
  {
    const std::lock_guard guard(parser_lock());
    auto& p = parser();
    static thread_local OpenBabel::OBMol mol;
    if (!p.read_mol(mol, text) || mol.NumAtoms() != check.atom_line.size())
      return Error{ErrorClass::syntax, "not readable as a MOL record", {}};
    if (p.log().find("kekul") != std::string::npos)
      return Error{ErrorClass::aromaticity, "no Kekule form for the aromatic system", {}};
    set_valences(mol, check.valence);
    drop_unmeant_stereo(mol, check.either);
    m = convert(mol, &source);
  }
  if (!m.ok()) return placed(m.error(), check.atom_line, source);
  if (auto e = check_mode(m.value(), mode)) return placed(*e, check.atom_line, source);
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
