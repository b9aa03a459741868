#include "untyped.hpp"

#include "environment.hpp"

namespace halostep {

const char* unknown_substituent(int z) noexcept {
  switch (z) {
    case element::B: return "a boron substituent, a kind the typed model does not know";
    case element::N: return "a nitrogen substituent (C=N, N-N, N-O or N-halogen) of a kind the typed model does not know";
    case element::O: return "an oxygen substituent bonded to an element of a kind the typed model does not know";
    case element::P: return "a phosphorus substituent, a kind the typed model does not know";
    case element::S: return "a sulfur substituent (S-S, S-N or S-halogen) of a kind the typed model does not know";
    case element::Se: return "a selenium substituent, a kind the typed model does not know";
    default: return "a substituent of a kind the typed model does not know";
  }
}

std::string_view untyped_name(int z) noexcept {
  switch (z) {
    case element::C: return "C-H, no type";
    case element::H: return "hydrogen H-H";
    case element::N: return "N-H, no type";
    case element::O: return "O-H, no type";
    case element::S: return "S-H, no type";
    default: return is_halogen(z) ? "hydrogen halide X-H" : "X-H, no type";
  }
}

}  // namespace halostep
