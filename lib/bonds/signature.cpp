#include "signature.hpp"

namespace halostep {
namespace {

bool upper(char c) noexcept { return c >= 'A' && c <= 'Z'; }
bool lower(char c) noexcept { return c >= 'a' && c <= 'z'; }

}  // namespace

// Sums of well-mixed constants per element: order does not matter, and unequal counts collide by chance only.
std::uint64_t element_signature(int z) noexcept {
  auto x = static_cast<std::uint64_t>(z) * 0x9e3779b97f4a7c15ULL;
  x = (x ^ (x >> 30)) * 0xbf58476d1ce4e5b9ULL;
  return (x ^ (x >> 27)) * 0x94d049bb133111ebULL;
}

std::uint64_t heavy_signature(const Molecule& m) noexcept {
  std::uint64_t sum = 0;
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).element > 1) sum += element_signature(m.atom(i).element);
  }
  return sum;
}

std::uint64_t heavy_signature(std::string_view s) noexcept {
  std::uint64_t sum = 0;
  const auto add = [&](std::size_t at, std::size_t n) {
    const int z = element_number(s.substr(at, n));
    if (z > 1) sum += element_signature(z);
  };
  for (std::size_t i = 0; i < s.size(); ++i) {
    if (s[i] == '[') {
      std::size_t k = i + 1;
      while (k < s.size() && s[k] >= '0' && s[k] <= '9') ++k;
      const bool two = k + 1 < s.size() && upper(s[k]) && lower(s[k + 1]);
      add(k, two ? 2 : 1);
      while (i < s.size() && s[i] != ']') ++i;
    } else if (upper(s[i]) || lower(s[i])) {
      const bool two = s.substr(i, 2) == "Cl" || s.substr(i, 2) == "Br";
      add(i, two ? 2 : 1);
      i += two;
    }
  }
  return sum;
}

}  // namespace halostep
