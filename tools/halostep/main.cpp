// The command: parses the command line and hands over to one file per sub-command.
#include <fmt/format.h>

#include <algorithm>
#include <csignal>
#include <cstdio>
#include <optional>
#include <string>
#include <vector>

#include "common.hpp"

namespace {

using namespace halostep;
using namespace halostep::command;

constexpr const char* kVersion = "0.1.0";

constexpr const char* kFooter =
    "Exit codes: 0 all answered, 1 bad usage, 2 nothing readable or output not writable,\n"
    "3 nothing inside the domain, 4 table fault, 5 some answered and some refused.\n"
    "Example: halostep outcome 'CC(C)C' --compare --temperature 25C --temperature 127C";

int print_version() {
  const auto engine = open_engine({});
  if (!engine) return kTableFault;
  const auto& table = engine->table();
  return write_out(fmt::format("halostep {}\ntable layout {}, content hash {}, {}\n", kVersion, table.layout,
                               table.content_hash, table.origin),
                   kAnswered);
}

/// What an argument that no option and no command takes was meant to be.
std::optional<std::string> unexpected(const CLI::App& app, const CLI::ParseError& e) {
  if (dynamic_cast<const CLI::ExtrasError*>(&e) == nullptr) return std::nullopt;
  const auto rest = app.remaining(true);
  if (rest.empty()) return std::nullopt;
  const auto option = std::find_if(rest.begin(), rest.end(), [](const std::string& s) { return s.starts_with('-'); });
  if (option != rest.end()) return fmt::format("unknown option '{}' here", *option);
  if (app.get_subcommands().empty()) {
    return fmt::format("unknown command '{}'; bonds, steps, outcome or table (halostep --help)", rest.front());
  }
  const auto* table = app.get_subcommands().front();
  if (table->get_subcommands().empty()) {
    return fmt::format("unknown view '{}'; rows, sources, show or models (halostep table --help)", rest.front());
  }
  return fmt::format("'{}' is one argument too many (halostep table {} --help)", rest.front(),
                     table->get_subcommands().front()->get_name());
}

int parse_failed(const CLI::App& app, const CLI::ParseError& e) {
  if (dynamic_cast<const CLI::CallForHelp*>(&e) != nullptr) {
    const CLI::App* shown = &app;  // the innermost sub-command named
    while (!shown->get_subcommands().empty()) shown = shown->get_subcommands().front();
    return write_out(shown->help(), kAnswered);
  }
  complain({ErrorClass::usage, unexpected(app, e).value_or(e.what()), "command line"});
  return kUsage;
}

/// A SMILES never begins with '-', so the "--" that ends the options of other programs has nothing to protect.
std::vector<std::string> arguments(int argc, char** argv) {
  std::vector<std::string> out(argv + 1, argv + argc);
  std::erase(out, "--");
  std::reverse(out.begin(), out.end());  // the order CLI11 wants
  return out;
}

int run(int argc, char** argv) {
  int exit_code = kAnswered;
  bool version = false;
  CLI::App app{
      "Radical halogenation from a structure: bond strengths, chain steps, rates and selectivity, each with its "
      "uncertainty and source."};
  app.name("halostep");
  set_usage(app, "halostep bonds | steps | outcome | table [options] ...");
  app.footer(kFooter);
  app.add_flag("--version", version, "version of the command and of the table");
  app.require_subcommand(0, 1);
  add_bonds(app, exit_code);
  add_steps(app, exit_code);
  add_outcome(app, exit_code);
  add_table(app, exit_code);
  try {
    app.parse(arguments(argc, argv));
  } catch (const CLI::ParseError& e) {
    return parse_failed(app, e);
  }
  if (!app.get_subcommands().empty()) return exit_code;
  if (version) return print_version();
  complain({ErrorClass::usage, "no command; bonds, steps, outcome or table (halostep --help)", "command line"});
  return kUsage;
}

}  // namespace

int main(int argc, char** argv) {
  std::signal(SIGPIPE, SIG_IGN);  // a closed pipe becomes an error of write_out()
  try {
    return run(argc, argv);
  } catch (const std::exception& e) {  // memory, or a fault of ours
    halostep::command::complain({halostep::ErrorClass::io, e.what(), "halostep"});
    return kUnreadable;
  }
}
