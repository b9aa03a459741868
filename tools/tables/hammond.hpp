// The Hammond table: selectivity of F, Cl, Br, I taken apart, hydrocarbons beside polar substrates.
#pragma once
#include <string>

#include "halostep/engine.hpp"

namespace halostep {

/// Markdown of docs/hammond.md.
std::string hammond_table(const Engine& engine);
/// Prints it and writes it to the file named (empty: not). Exit code of the command.
int hammond(Table table, const std::string& markdown);

}  // namespace halostep
