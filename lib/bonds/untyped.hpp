// Words for what the typed model does not cover.
#pragma once
#include <string_view>

namespace halostep {

/// Why a group on a carbon is not covered, by the element of its first atom.
const char* unknown_substituent(int element) noexcept;
/// The type of an X-H bond that has none: of water, hydrogen, HX, HCN, ...
std::string_view untyped_name(int element) noexcept;

}  // namespace halostep
