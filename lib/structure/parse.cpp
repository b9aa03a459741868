#include <fmt/format.h>
#include <openbabel/mol.h>
#include <openbabel/obconversion.h>
#include <openbabel/oberror.h>

#include <charconv>
#include <mutex>
#include <sstream>

#include "convert.hpp"
#include "parser.hpp"
#include "smiles_check.hpp"

namespace halostep {
namespace {

bool blank(char c) { return c == ' ' || c == '\t' || c == '\r' || c == '\n'; }

}  // namespace

// Open Babel crashes when two threads parse at once, so one parser serves all, under one lock.
std::mutex& parser_lock() {
  static std::mutex m;
  return m;
}

Parser& parser() {
  static Parser p;
  return p;
}

Parser::Parser() {
  smiles_.SetInFormat("smi");
  marked_.SetInFormat("smi");
  marked_.AddOption("a", OpenBabel::OBConversion::INOPTIONS);
  OpenBabel::obErrorLog.SetOutputStream(&log_);
  OpenBabel::obErrorLog.SetOutputLevel(OpenBabel::obWarning);
}

bool Parser::read_smiles(OpenBabel::OBMol& m, const std::string& text) {
  log_.str({});
  m.Clear();
  // The reader judges all rings only to leave aromatic bonds out of the search for '/' and '\\'; most texts have none.
  as_written_ = text.find_first_of("/\\") == std::string::npos;
  auto& reader = as_written_ ? marked_ : smiles_;
  // Past OBConversion::Read, which sets the locale at each call; SMILES holds no decimal numbers.
  in_.clear();
  in_.str(text);
  reader.SetInStream(&in_);
  return reader.GetInFormat()->ReadMolecule(&m, &reader);
}

bool Parser::read_mol(OpenBabel::OBMol& m, const std::string& block) {
  if (!mol_ready_) {
    mol_.SetInFormat("mol");
    mol_ready_ = true;
  }
  log_.str({});
  m.Clear();
  return mol_.ReadString(&m, block);
}

namespace {

// "atom 5" of an error becomes its place in the text.
Error placed(Error e, std::string_view text, const std::vector<std::size_t>& position, const std::vector<int>& source) {
  if (e.place.starts_with("atom ")) {
    std::size_t k = 0;
    std::from_chars(e.place.data() + 5, e.place.data() + e.place.size(), k);
    if (k >= 1 && k <= source.size() && static_cast<std::size_t>(source[k - 1]) < position.size()) {
      e.place = place_in(text, position[static_cast<std::size_t>(source[k - 1])]);
      return e;
    }
  }
  e.place = place_in(text, 0);
  return e;
}

// "c", "[nH]", "[13c]".
bool written_aromatic(std::string_view text, std::size_t at) {
  if (text[at] == '[') ++at;
  while (text[at] >= '0' && text[at] <= '9') ++at;
  return text[at] >= 'a' && text[at] <= 'z';
}

}  // namespace

Result<Molecule> parse_smiles(std::string_view input, ParseMode mode) {
  if (input.size() > kMaxStructureText) {
    return Error{ErrorClass::too_long, fmt::format("{} bytes; the limit is {}", input.size(), kMaxStructureText),
                 fmt::format("'{}...'", input.substr(0, 20))};
  }
  std::string_view text = input;
  while (!text.empty() && blank(text.front())) text.remove_prefix(1);
  std::size_t end = 0;
  while (end < text.size() && !blank(text[end])) ++end;
  text = text.substr(0, end);
  if (text.empty()) return Error{ErrorClass::empty, "no structure", {}};
  if (const auto arrow = text.find('>'); arrow != std::string_view::npos) {
    return Error{ErrorClass::reaction, "reaction text where one molecule is meant", place_in(text, arrow)};
  }
  auto check = check_smiles(text);
  if (check.error) return *check.error;
  std::vector<int> source;
  Result<Molecule> m = Error{};
  {
    const std::lock_guard guard(parser_lock());
    auto& p = parser();
    OpenBabel::OBMol mol;  // a kept one would drag the room of the longest structure through every later read
    if (!p.read_smiles(mol, std::string(text)) || mol.NumAtoms() == 0) {
      return Error{ErrorClass::syntax, "not readable as SMILES", place_in(text, 0)};
    }
    if (p.log().find("kekul") != std::string::npos || p.log().find("Kekul") != std::string::npos) {
      return Error{ErrorClass::aromaticity, "no Kekule form for the aromatic system", place_in(text, text.find_first_of("bcnops"))};
    }
    m = convert(mol, &source, p.as_written());
  }
  if (!m.ok()) return placed(m.error(), text, check.atom_position, source);
  for (int i = 0; i < m.value().atom_count(); ++i) {
    const auto at = check.atom_position[static_cast<std::size_t>(source[static_cast<std::size_t>(i)])];
    if (written_aromatic(text, at) && !m.value().atom(i).in_ring) {
      return Error{ErrorClass::aromaticity, "an aromatic atom outside a ring", place_in(text, at)};
    }
  }
  if (auto e = check_mode(m.value(), mode)) {
    if (e->cls == ErrorClass::fragments) e->place = place_in(text, text.find('.'));
    else *e = placed(*e, text, check.atom_position, source);
    return *e;
  }
  return m;
}

Result<ReactionText> parse_reaction(std::string_view text) {
  while (!text.empty() && blank(text.front())) text.remove_prefix(1);
  while (!text.empty() && blank(text.back())) text.remove_suffix(1);
  const auto arrow = text.find('>');
  if (arrow == std::string_view::npos) return Error{ErrorClass::reaction, "no '>>' in the reaction", place_in(text, 0)};
  if (text.substr(arrow, 2) != ">>" || text.find('>', arrow + 2) != std::string_view::npos) {
    return Error{ErrorClass::reaction, "one '>>' is needed, with nothing between", place_in(text, arrow)};
  }
  ReactionText out;
  for (int side = 0; side < 2; ++side) {
    const auto part = side == 0 ? text.substr(0, arrow) : text.substr(arrow + 2);
    if (part.empty()) return Error{ErrorClass::reaction, side == 0 ? "nothing on the left" : "nothing on the right", place_in(text, arrow)};
    std::size_t from = 0;
    while (from <= part.size()) {
      const auto dot = std::min(part.find('.', from), part.size());
      auto m = parse_smiles(part.substr(from, dot - from), ParseMode::species);
      if (!m.ok()) return m.error();
      (side == 0 ? out.left : out.right).push_back(std::move(m).value());
      from = dot + 1;
    }
  }
  return out;
}

}  // namespace halostep
