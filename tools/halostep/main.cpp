// The command: parses the command line and hands over to one file per sub-command.
#include <fmt/format.h>

#include <csignal>
#include <cstdio>

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

int parse_failed(const CLI::App& app, const CLI::ParseError& e) {
  if (dynamic_cast<const CLI::CallForHelp*>(&e) != nullptr) {
    const CLI::App* shown = &app;  // the innermost sub-command named
    while (!shown->get_subcommands().empty()) shown = shown->get_subcommands().front();
    return write_out(shown->help(), kAnswered);
  }
  complain({ErrorClass::usage, e.what(), "command line"});
  return kUsage;
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
    app.parse(argc, argv);
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
