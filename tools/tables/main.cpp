#include <CLI/CLI.hpp>
#include <string>

#include "tables/commands.hpp"
#include "tables/validate.hpp"

int main(int argc, char** argv) {
  CLI::App app("Checks the curated table of halostep, fits its models and compiles it.", "halostep-tables");
  app.require_subcommand(1);
  std::string dir, out;
  int code = 0;
  const auto command = [&](const char* name, const char* what) {
    auto* sub = app.add_subcommand(name, what);
    sub->add_option("DIR", dir, "directory of the curated files")->required();
    return sub;
  };
  command("check", "check all files and print the counts")->callback([&] { code = halostep::check_command(dir); });
  auto* compile = command("compile", "check, repeat the fit, compare it with fitted.json, and write the table");
  compile->add_option("OUT", out, "the table to write")->required();
  compile->callback([&] { code = halostep::compile_command(dir, out); });
  command("refit", "check, fit, and write fitted.json")->callback([&] { code = halostep::refit_command(dir); });
  auto* check_engine = command("validate", "judge the engine on molecules held out of every file, and print the report");
  halostep::ValidateFiles files;
  check_engine->add_option("--markdown", files.markdown, "write the report to this file");
  check_engine->add_option("--json", files.json, "write the figures to this file");
  check_engine->add_option("--plot", files.plot, "write the reliability plot to this file, as SVG");
  check_engine->add_option("--rows", files.rows, "write the list of rows that judge to this file, as CSV");
  check_engine->callback([&] { code = halostep::validate_command(dir, files); });
  std::string markdown;
  auto* parts = command("hammond", "take the selectivity of F, Cl, Br, I apart on hydrocarbons and polar substrates, from fitted.json");
  parts->add_option("--markdown", markdown, "write the table to this file");
  parts->callback([&] { code = halostep::hammond_command(dir, markdown); });
  auto* adjust = command("adjust", "adjust all enthalpies of formation and bond energies jointly and print the result");
  std::string csv;
  adjust->add_option("--csv", csv, "write the system and its solution to this file");
  adjust->callback([&] { code = halostep::adjust_command(dir, csv); });
  app.footer(
      "Exit code: 0 done, 1 faults found (one a line on stderr: file:line: reason), 2 wrong usage.\n"
      "Example: halostep-tables compile bde_tables halostep.sqlite");
  try {
    app.parse(argc, argv);
  } catch (const CLI::ParseError& e) {
    return app.exit(e) == 0 ? 0 : 2;
  }
  return code;
}
