// The one Open Babel parser of the process. Hold parser_lock() while using it.
#pragma once
#include <openbabel/obconversion.h>

#include <mutex>
#include <sstream>
#include <string>

namespace OpenBabel {
class OBMol;
}

namespace halostep {

class Parser {
 public:
  Parser();
  /// Leaves it to convert() to judge the rings where as_written() says so.
  bool read_smiles(OpenBabel::OBMol& m, const std::string& text);
  bool read_mol(OpenBabel::OBMol& m, const std::string& block);
  /// The aromatic marks of the last SMILES read are those of its text, not yet judged.
  [[nodiscard]] bool as_written() const { return as_written_; }
  /// Warnings of the last read.
  [[nodiscard]] std::string log() const { return log_.str(); }

 private:
  OpenBabel::OBConversion smiles_, marked_, mol_;
  bool mol_ready_ = false, as_written_ = false;
  std::istringstream in_;
  std::ostringstream log_;
};

std::mutex& parser_lock();
Parser& parser();

}  // namespace halostep
