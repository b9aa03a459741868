// What is said of all judged rates together.
#include <fmt/format.h>

#include <cmath>

#include "tables/validate.hpp"

namespace halostep {

void finish_rates(const Table& table, Validation& out) {
  for (const char* carrier : {"Cl", "F", "Br"}) {
    std::vector<double> e, u;
    int far = 0, far_marked = 0;
    for (const auto& r : out.rows) {
      if (r.carrier != carrier) continue;
      e.push_back(r.error);
      u.push_back(r.u);
      if (std::abs(r.error) > 2) ++(r.marked ? far_marked : far);
    }
    out.rates.remarks.push_back(
        fmt::format("{} + all, {} rows: 95 % within {:.2f}, median u(log10 k) {:.2f}; off by more than two decades: {} "
                    "without a mark, {} marked extrapolated",
                    carrier, e.size(), quantile_of(e, 0.95), quantile_of(u, 0.5), far, far_marked));
  }
  for (const auto& [reagent, right] : out.ranges) {
    double sum = 0;
    for (const double r : right) sum += r;
    out.ratios.remarks.push_back(
        fmt::format("{}: of {} pairs measured to differ by more than 1.5, {:.0f} % are ordered right", reagent,
                    right.size(), 100 * sum / static_cast<double>(right.size())));
  }
  for (const char* x : {"F", "Cl", "Br", "I"}) {
    for (const auto& m : table.models) {
      if (m.name != std::string("line.") + x || m.values.size() != 2) continue;
      double rows = 0;
      for (const auto& [key, value] : m.settings) rows = key == "rows" ? value : rows;
      out.forms.remarks.push_back(
          fmt::format("straight line through the measured activation energies, {}: alpha {:.2f}, u {:.2f}, {:.0f} rows",
                      x, m.values[1], std::sqrt(m.covariance[3]), rows));
    }
  }
}

}  // namespace halostep
