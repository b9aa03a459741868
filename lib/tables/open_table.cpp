#include <SQLiteCpp/SQLiteCpp.h>
#include <fmt/format.h>
#include <sqlite3.h>

#include <cstdlib>
#include <filesystem>

#include "halostep/tables.hpp"
#include "tables/embedded.hpp"
#include "tables/sqlite_read.hpp"
#include "tables/table_io.hpp"

namespace halostep {
namespace {

/// Where the table comes from, and the words for where else it was looked for.
struct Place {
  std::string path;    // empty: built-in
  std::string looked;
};

Place find_place(const std::string& path) {
  const char* variable = std::getenv(kTableVariable);
  const std::string from_variable = variable == nullptr ? "" : variable;
  const std::string variable_words =
      from_variable.empty() ? fmt::format("${} is not set", kTableVariable) : fmt::format("${} = '{}'", kTableVariable, from_variable);
  if (!path.empty()) return {path, fmt::format("given by the caller, so not looked at: {}, the built-in table", variable_words)};
  if (!from_variable.empty()) {
    return {from_variable, fmt::format("from ${}, so not looked at: the built-in table", kTableVariable)};
  }
  return {"", fmt::format("no path was given, {}", variable_words)};
}

Error fault(const Place& place, std::string_view found, std::string_view wanted) {
  const std::string name = place.path.empty() ? "the built-in table" : fmt::format("the table '{}'", place.path);
  return {ErrorClass::table, fmt::format("{}: found {}, wanted {} ({})", name, found, wanted, place.looked), place.path};
}

/// Opens the file read-only, or the built-in bytes without copying them.
SQLite::Database open_database(const Place& place) {
  if (!place.path.empty()) return SQLite::Database(place.path, SQLite::OPEN_READONLY);
  SQLite::Database db(":memory:", SQLite::OPEN_READWRITE);
  const auto bytes = embedded_table();
  // READONLY: SQLite never writes to the bytes, so the const_cast is safe.
  auto* data = reinterpret_cast<unsigned char*>(const_cast<char*>(bytes.data()));
  const auto size = static_cast<sqlite3_int64>(bytes.size());
  if (sqlite3_deserialize(db.getHandle(), "main", data, size, size, SQLITE_DESERIALIZE_READONLY) != SQLITE_OK) {
    throw std::runtime_error(db.getErrorMsg());
  }
  return db;
}

/// Fails on pages or rows that SQLite itself finds damaged.
std::string quick_check(SQLite::Database& db) { return db.execAndGet("PRAGMA quick_check(1)").getString(); }

Result<Table> load(const Place& place) {
  SQLite::Database db = open_database(place);
  std::string layout;
  try {
    layout = read_meta(db.getHandle(), "layout");
  } catch (const std::exception& e) {
    const auto wanted = fmt::format("a halostep table of layout {}", kTableLayout);
    return fault(place, fmt::format("no such table ({})", e.what()), wanted);
  }
  if (layout != std::to_string(kTableLayout)) {
    return fault(place, fmt::format("layout {}", layout), fmt::format("layout {}", kTableLayout));
  }
  // The built-in bytes are part of the program, and the content hash below covers every row read from them.
  if (!place.path.empty()) {
    if (const auto state = quick_check(db); state != "ok") {
      return fault(place, fmt::format("a damaged file ({})", state), "a sound SQLite file");
    }
  }
  const std::string wanted_hash = read_meta(db.getHandle(), "content_hash");
  Table table = read_rows(db.getHandle());
  table.layout = kTableLayout;
  table.content_hash = content_hash(table);
  if (table.content_hash != wanted_hash) {
    return fault(place, fmt::format("rows of content hash {}", table.content_hash),
                 fmt::format("{} as recorded; rows were changed after the table was compiled", wanted_hash));
  }
  table.origin = place.path.empty() ? "built-in" : place.path;
  return table;
}

}  // namespace

Result<Table> open_table(const std::string& path) {
  const Place place = find_place(path);
  std::error_code ec;
  if (place.path.empty() && embedded_table().empty()) {
    return fault(place, "no built-in table in this program", "a path to one");
  }
  if (!place.path.empty() && !std::filesystem::is_regular_file(place.path, ec)) {
    const bool there = std::filesystem::exists(place.path, ec);
    return fault(place, there ? "something that is not a file" : "no such file", "a table made by halostep-tables");
  }
  try {
    return load(place);
  } catch (const std::exception& e) {
    return fault(place, fmt::format("what SQLite cannot read ({})", e.what()), "a table made by halostep-tables");
  }
}

}  // namespace halostep
