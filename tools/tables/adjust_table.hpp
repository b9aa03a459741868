// The joint adjustment put into the table.
#pragma once
#include "halostep/error.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// Adjusts all enthalpies of the table together: fills Table::adjusted, and gives bonds and gas species their adjusted
/// values. Errors: table (the rows do not determine a species: the message names it).
std::optional<Error> adjust_table(Table& table);

}  // namespace halostep
