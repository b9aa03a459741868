#include "gradient.hpp"

#include <bit>
#include <cmath>

#include "halostep/quantity.hpp"

namespace halostep {

namespace {

// d ln k by the step enthalpy and by the polar energy.
struct Slopes {
  double enthalpy = 0, polar = 0;
};

// Energies of the groups, and how they fade with distance.
void add_groups(std::span<const double> p, const RateSite& s, const PolarParts& parts, const Slopes& d,
                std::vector<Partial>& out) {
  const double alpha = d.polar * parts.left * parts.screen;
  const double beyond = d.polar * parts.left * parts.screen_beyond * parts.field;
  double by_decay = 0;
  for (auto present = s.present; present != 0; present &= present - 1) {
    const int k = std::countr_zero(present);
    const auto& n = s.count[static_cast<std::size_t>(k)];
    const bool halogen = k <= static_cast<int>(PolarGroup::iodine);
    if (n[0]) out.push_back({kp::polar_alpha + k, alpha * (halogen ? parts.repeat[k > 0] : 1.0) * n[0]});
    double field = 0, derivative = 0, factor = 1, below = 0;
    for (std::size_t i = 1; i < n.size(); ++i) {
      field += n[i] * factor;
      derivative += n[i] * below;
      below = static_cast<double>(i) * factor;  // d(decay^i) / d(decay)
      factor *= p[kp::decay];
    }
    if (field == 0) continue;
    out.push_back({kp::polar_beyond + k, beyond * field});
    by_decay += p[static_cast<std::size_t>(kp::polar_beyond + k)] * derivative;
  }
  if (by_decay != 0) out.push_back({kp::decay, beyond * by_decay});
  for (int kind = 0; kind < 2; ++kind) {
    const auto i = static_cast<std::size_t>(kind);
    if (parts.halogen_count[i] > 1) out.push_back({kp::repeat + kind, alpha * parts.halogens[i] * parts.d_repeat[i]});
  }
  if (parts.all_halogens() > 0 && parts.withdrawing > 0) out.push_back({kp::captive, alpha * parts.withdrawing});
  if (parts.withdrawing == 0) return;
  for (int k = 0; k < kWithdrawing; ++k) {
    const int n = s.count[static_cast<std::size_t>(kWithdrawingGroups[static_cast<std::size_t>(k)])][0];
    if (n > 0) out.push_back({kp::unfelt + k, d.enthalpy * n});
  }
}

// Oxygens on the centre, and acyl centres.
void add_oxygen(std::span<const double> p, const RateSite& s, const PolarParts& parts, const Slopes& d,
                std::vector<Partial>& out) {
  const double further = d.polar * parts.left * parts.screen_beyond * parts.beyond;
  if (is_acyl(s.a_class)) {
    out.push_back({kp::acyl_field, further});
    if (parts.all_halogens() > 0) out.push_back({kp::acyl_halide, d.enthalpy * parts.all_halogens()});
  }
  if (s.oxygens == 0) return;
  const auto c = static_cast<std::size_t>(s.a_class);
  out.push_back({kp::oxygen_field, further * parts.free});
  if (const int n = s.count[static_cast<std::size_t>(PolarGroup::fluorine)][0]; n > 0)
    out.push_back({kp::fluoro_ether, d.enthalpy * n});
  if (s.far_halogens == 0) return;
  out.push_back({kp::tied_shift, d.enthalpy * (1 - parts.free)});
  double by_free = p[kp::a_class + c - 1] + d.enthalpy * (p[kp::shift_class + c - 1] - p[kp::tied_shift]) +
                   further * (p[kp::oxygen_field] - 1);
  if (parts.bare != 0) by_free -= d.polar * p[kp::bare];
  out.push_back({kp::tie, -by_free * parts.free * parts.free * s.far_halogens / s.oxygens});
}

// What acts on the sum of all groups.
void add_common(std::span<const double> p, const PolarParts& parts, const Slopes& d, std::vector<Partial>& out) {
  const double q = parts.sum / p[kp::saturation];
  if (q != 0) out.push_back({kp::saturation, d.polar * (1 - parts.left * (1 + q))});
  if (parts.bare != 0) out.push_back({kp::bare, d.polar * parts.bare});
  if (parts.d_carbons != 0) {
    out.push_back({parts.plain ? kp::plain_repeat : kp::alkyl_repeat, d.polar * p[kp::alkyl] * parts.d_carbons});
  }
  if (parts.branches != 0) out.push_back({kp::a_branch, parts.branches});
  if (parts.d_branches != 0) out.push_back({kp::a_branch_repeat, p[kp::a_branch] * parts.d_branches});
  if (parts.alkyls == 0) return;
  const double per_alpha = parts.alkyls * parts.screen / p[kp::screen];
  const double per_beyond = (parts.alkyls - 1) * parts.screen_beyond / p[kp::screen];
  out.push_back(
      {kp::screen, d.polar * parts.left * (per_alpha * parts.alpha + per_beyond * parts.field * parts.beyond)});
}

}  // namespace

RateGradient rate_gradient(std::span<const double> p, const KineticForm& form, const RateSite& s, const SiteRate& at,
                           double temperature) {
  const auto par = [&](int i) { return p[static_cast<std::size_t>(i)]; };
  const double rt = kGasConstant * temperature, w = par(kp::width), x = at.effective;
  const double root = std::sqrt(x * x + 4 * w * w), root3 = root * root * root;
  const double slope = -par(kp::tightness) * 2 * w * w / root3 - at.position / rt;  // d ln k / dx
  const double polar = form.polar_outside ? -1 / rt : slope;
  RateGradient g;
  g.dh = slope;
  auto& out = g.parameters;
  out.reserve(32);
  out = {{kp::ln_a, 1.0},
         {kp::tightness, -at.position},
         {kp::exponent, std::log(temperature / 298.0)},
         {kp::shift, slope},
         {kp::width, par(kp::tightness) * 2 * x * w / root3 - 2 * w / (root * rt)},
         {kp::alkyl, polar * at.parts.carbons},
         {kp::a_alkyl, static_cast<double>(s.carbons)}};
  if (s.quaternary > 0) out.push_back({kp::a_quaternary, static_cast<double>(s.quaternary)});
  const auto& parts = at.parts;
  const Slopes d{slope, polar};
  if (const int c = static_cast<int>(s.a_class); c > 0) {
    out.push_back({kp::a_class + c - 1, parts.free});
    out.push_back({kp::shift_class + c - 1, slope * parts.free});
  }
  add_groups(p, s, parts, d, out);
  add_oxygen(p, s, parts, d, out);
  add_common(p, parts, d, out);
  return g;
}

}  // namespace halostep
