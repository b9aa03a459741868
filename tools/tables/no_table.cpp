// The table compiler comes before the table: it has none built in.
#include "tables/embedded.hpp"

namespace halostep {

std::string_view embedded_table() { return {}; }

}  // namespace halostep
