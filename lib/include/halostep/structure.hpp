// Reading and writing structures; equivalence of atoms.
#pragma once
#include <cstdint>
#include <istream>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "halostep/molecule.hpp"

namespace halostep {

/// Longest structure text accepted, bytes.
inline constexpr std::size_t kMaxStructureText = 65536;

/// What a text may hold.
enum class ParseMode {
  substrate,  // one closed-shell neutral fragment without metals: what the commands take
  species     // one neutral fragment, radicals and bare atoms allowed: reactions, table rows
};

/// Parses SMILES (OpenSMILES 1.0) into a Molecule; thread-safe (the parser behind it is locked).
/// Text after the first blank is the name and not part of the structure.
/// Refusals: see ErrorClass; `place` names the position, e.g. "position 4 in 'C(((('".
Result<Molecule> parse_smiles(std::string_view text, ParseMode mode = ParseMode::substrate);

/// Two sides of a reaction SMILES "A.B>>C.D" (agents between the arrows are an error).
struct ReactionText {
  std::vector<Molecule> left, right;
};
/// Errors: reaction (no '>>', empty side), and those of parse_smiles in mode species.
Result<ReactionText> parse_reaction(std::string_view text);

/// The first atom of an element outside the domain; class metal, or domain for a noble gas; placed "atom 3".
std::optional<Error> uncovered_element(const Molecule& m);

/// One record of an SDF or MOL file: a molecule or why it was refused, with its number (1-based) and title.
struct SdfRecord {
  int number = 0;
  std::string title;
  Result<Molecule> molecule = Error{};
};
/// Longest record of an SDF or MOL file, bytes; a longer one becomes an error record of class too_long.
inline constexpr std::size_t kMaxRecordText = 16 * kMaxStructureText;
/// Reads V2000/V3000 MOL and multi-record SDF from a stream; LF, CRLF or CR. A broken record becomes an
/// error record, placed "record 3, line 7" (the title is line 1), and reading goes on after its "$$$$" line.
class SdfReader {
 public:
  explicit SdfReader(std::istream& in, ParseMode mode = ParseMode::substrate);
  ~SdfReader();
  SdfReader(const SdfReader&) = delete;
  SdfReader& operator=(const SdfReader&) = delete;
  /// The next record, or nothing at the end of the stream.
  std::optional<SdfRecord> next();

 private:
  struct Impl;
  std::unique_ptr<Impl> impl_;
};

/// Classes of constitutionally equivalent atoms (stereo ignored), numbered 0.. by first atom.
/// Partition refinement, O(m log n) on chains and trees; regular cages are split by individualisation.
std::vector<int> symmetry_classes(const Molecule& m);

/// Canonical SMILES: equal text for equal structures (with stereo unless `stereo` is false).
/// Our own order; not that of any other program.
std::string canonical_smiles(const Molecule& m, bool stereo = true);

/// Order-independent 64-bit fingerprint of the constitution (stereo and atom order ignored);
/// equal for equal structures; unequal structures collide with chance about 2^-64, regular cages apart.
std::uint64_t structure_hash(const Molecule& m);

}  // namespace halostep
