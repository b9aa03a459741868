// Writing the table, and what reading and writing share.
#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "halostep/tables.hpp"

namespace halostep {

/// All rows, entries and models in one byte string: text with its length before it, integers and IEEE 754 doubles
/// as 8 little-endian bytes, a marker byte before an optional number. Equal tables give equal bytes.
std::string canonical_dump(const Table& table);

/// SHA-256 of canonical_dump().
std::string content_hash(const Table& table);

/// Writes `table` under the schema `schema_sql` to `path`: to a temporary file beside it first, renamed when
/// complete. The layout and the content hash are written by this function, not taken from `table`.
/// Returns what went wrong, if anything (classes io, table).
std::optional<Error> write_table(const Table& table, std::string_view schema_sql, const std::string& path);

}  // namespace halostep
