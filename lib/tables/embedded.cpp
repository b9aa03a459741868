#include "tables/embedded.hpp"

// Set by embedded.S around the bytes of halostep.sqlite.
extern "C" {
extern const char halostep_table_begin[];
extern const char halostep_table_end[];
}

namespace halostep {

std::string_view embedded_table() {
  return {halostep_table_begin, static_cast<std::size_t>(halostep_table_end - halostep_table_begin)};
}

}  // namespace halostep
