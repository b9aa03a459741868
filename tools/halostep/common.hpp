// Shared by the commands: options, input, the table, output, exit codes.
#pragma once
#include <CLI/CLI.hpp>
#include <optional>
#include <string>
#include <vector>

#include "halostep/engine.hpp"
#include "halostep/report.hpp"
#include "halostep/structure.hpp"

namespace halostep::command {

/// Exit codes; docs/errors.md explains them.
enum Exit { kAnswered = 0, kUsage = 1, kUnreadable = 2, kOutsideDomain = 3, kTableFault = 4, kPartly = 5 };

enum class Format { text, json, csv };

/// Options as typed; read by Settings.
struct Options {
  std::string format = "text", units = "kj", table;
  std::vector<std::string> files, halogens, temperatures, reactions;
  bool typed = false, evidence = false, compare = false;
  std::string site, product;
  std::string medium = "gas", conversion = "0", halogen_ratio = "1";
};

/// Options once checked.
struct Settings {
  Format format = Format::text;
  TextOptions text;
  std::vector<Halogen> halogens;
  std::vector<double> temperatures;
};

/// One thing to answer: a molecule or why there is none, or the text of a reaction.
struct Input {
  SubstrateHead head;
  std::optional<Molecule> molecule;  // absent with head.error, and for reactions
  std::string place;                 // "argument 2", "file.smi, line 4"
  bool is_reaction = false;
};

/// The first line of --help, after "Usage: ".
void set_usage(CLI::App& app, std::string usage);
void add_common(CLI::App& app, Options& options);
void add_input(CLI::App& app, Options& options);
void add_halogens(CLI::App& app, Options& options);
void add_temperatures(CLI::App& app, Options& options);

Result<Settings> check(const Options& options);
/// Arguments left over by the option parser are the substrates; an unknown option or a stray halogen among them is an
/// error.
Result<std::vector<std::string>> positionals(const CLI::App& app, const Options& options);
/// Reads every substrate. Text with '>>' becomes a reaction if `reactions`, else a refusal of class reaction.
Result<std::vector<Input>> read_inputs(const CLI::App& app, const Options& options, bool reactions);

/// One line on stderr: "halostep: class: message (place)".
void complain(const Error& error);
/// Reports a refusal of one input and returns the error with its place filled in.
Error refuse(const Input& input, Error error);
/// Counts answers and refusals into an exit code.
class Tally {
 public:
  void answered() { ++answered_; }
  void refused(const Error& error);
  [[nodiscard]] int exit_code() const noexcept;

 private:
  int answered_ = 0, unreadable_ = 0, outside_ = 0;
};
/// Writes the whole document at once; returns `code`, or kUnreadable with a line on stderr when that fails.
int write_out(const std::string& document, int code);
/// Opens the table or complains.
std::optional<Engine> open_engine(const Options& options);

/// Each adds its sub-command to the app and sets `exit_code` when it has run.
void add_bonds(CLI::App& app, int& exit_code);
void add_steps(CLI::App& app, int& exit_code);
void add_outcome(CLI::App& app, int& exit_code);
void add_table(CLI::App& app, int& exit_code);

}  // namespace halostep::command
