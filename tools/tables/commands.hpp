// The commands of halostep-tables. Each returns the exit code: 0 when all is well, 1 on any fault. Faults go to
// stderr, one a line, as file:line: reason.
#pragma once
#include <string>

namespace halostep {

struct ValidateFiles;

/// Checks all files and prints the counts.
int check_command(const std::string& dir);
/// Checks, repeats the fit, compares it with fitted.json and writes the table to `out`.
int compile_command(const std::string& dir, const std::string& out);
/// Checks, fits and writes fitted.json.
int refit_command(const std::string& dir);
/// Checks, then judges the engine on molecules held out of every file; writes to the files named, if any.
int validate_command(const std::string& dir, const ValidateFiles& files);
/// Checks and writes the Hammond table from the models of fitted.json.
int hammond_command(const std::string& dir, const std::string& markdown);
/// Checks, then adjusts all enthalpies jointly and prints the result; `csv` (may be empty): where the system goes.
int adjust_command(const std::string& dir, const std::string& csv);

}  // namespace halostep
