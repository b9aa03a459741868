// The table built into the library.
#pragma once
#include <string_view>

namespace halostep {

/// Bytes of halostep.sqlite; empty in the table compiler, which comes before the table.
std::string_view embedded_table();

}  // namespace halostep
