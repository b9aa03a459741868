// Reads all rows of an open database into a Table.
#pragma once
#include <string>

#include "halostep/tables.hpp"

struct sqlite3;

namespace halostep {

/// Value of a key in `meta`; throws std::runtime_error when the table or the key is missing.
std::string read_meta(sqlite3* db, const char* key);

/// Every row, entry and model; origin and hash are left empty. Throws std::runtime_error.
Table read_rows(sqlite3* db);

}  // namespace halostep
