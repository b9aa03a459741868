// How often intervals hold what they promise, as figures and as a plot.
#pragma once
#include <array>
#include <string>
#include <vector>

namespace halostep {

/// Nominal coverages of the plot, in per cent.
inline constexpr std::array<int, 11> kNominal = {10, 20, 30, 40, 50, 60, 70, 80, 90, 95, 99};

struct ReliabilityCurve {
  std::string name;
  std::size_t rows = 0;
  std::array<double, kNominal.size()> observed{};  // per cent
};

/// `z`: errors in units of their standard uncertainty, taken as normal.
ReliabilityCurve reliability(std::string name, const std::vector<double>& z);

/// Nominal against observed coverage as SVG; told apart by dashes and marks, not by colour.
std::string reliability_svg(const std::vector<ReliabilityCurve>& curves);

}  // namespace halostep
