#include "model.hpp"

#include <algorithm>
#include <bit>
#include <cmath>
#include <tuple>
#include <utility>

#include "halostep/quantity.hpp"

namespace halostep {

std::vector<std::string> kinetic_parameter_names() {
  std::vector<std::string> n(static_cast<std::size_t>(kp::total));
  const auto set = [&](int i, std::string s) { n[static_cast<std::size_t>(i)] = std::move(s); };
  set(kp::ln_a, "ln A per H, alkyl");
  for (int c = 1; c < kAClasses; ++c) {
    set(kp::a_class + c - 1, std::string("ln A offset, ") + a_class_name(static_cast<AClass>(c)));
    set(kp::shift_class + c - 1, std::string("shift, ") + a_class_name(static_cast<AClass>(c)));
  }
  set(kp::tightness, "tightness");
  set(kp::exponent, "T exponent");
  set(kp::shift, "shift");
  set(kp::width, "width");
  set(kp::alkyl, "polar, alkyl on the centre");
  for (int g = 0; g < kPolarGroups; ++g) {
    const std::string name = polar_group_name(static_cast<PolarGroup>(g));
    set(kp::polar_alpha + g, "polar, " + name + " on the centre");
    set(kp::polar_beyond + g, "polar, " + name + " one bond further");
  }
  set(kp::decay, "decay per bond");
  set(kp::ln_limit, "ln encounter limit");
  set(kp::limit_power, "encounter limit, power of heavy atoms");
  set(kp::saturation, "polar saturation");
  set(kp::a_alkyl, "ln A per carbon on the centre");
  set(kp::bare, "polar, no donor on the centre");
  set(kp::screen, "polar, factor per alkyl on the centre");
  for (int k = 0; k < kWithdrawing; ++k) {
    set(kp::unfelt + k, std::string("weakening not felt, ") + polar_group_name(kWithdrawingGroups[static_cast<std::size_t>(k)]));
  }
  set(kp::repeat, "polar, factor per further F on the centre");
  set(kp::repeat + 1, "polar, factor per further Cl, Br or I on the centre");
  set(kp::captive, "polar, withdrawing group beside halogen on the centre");
  set(kp::tie, "lone pair held per halogen behind O");
  set(kp::tied_shift, "shift, lone pair held");
  set(kp::oxygen_field, "factor on further groups, alpha-O");
  set(kp::acyl_field, "factor on further groups, acyl");
  set(kp::fluoro_ether, "shift, F beside O on the centre");
  set(kp::acyl_halide, "shift, halogen on acyl");
  set(kp::alkyl_repeat, "polar, factor per further carbon on the centre");
  set(kp::plain_repeat, "polar, factor per further carbon, plain alkane");
  set(kp::a_branch, "ln A, second carbon on the centre");
  set(kp::a_branch_repeat, "ln A, factor of the third carbon on the centre");
  set(kp::a_quaternary, "ln A per quaternary carbon beside the centre");
  return n;
}

bool conjugates(int group) noexcept {
  switch (static_cast<PolarGroup>(group)) {
    case PolarGroup::carbonyl: case PolarGroup::carboxyl: case PolarGroup::carbonyl_halide: case PolarGroup::cyano:
    case PolarGroup::nitro: case PolarGroup::aryl: case PolarGroup::unsaturated: return true;
    default: return false;
  }
}

namespace {

constexpr int kHalogenGroups = 4;  // F, Cl, Br, I come first among the polar groups

// 1 + r + ... + r^(n-1): n groups of a kind when each counts r times the one before; and d/dr.
std::pair<double, double> repeated(int n, double r) {
  double sum = 0, slope = 0, power = 1;
  for (int k = 0; k < n; ++k, power *= r) {
    sum += power;
    if (k + 1 < n) slope += (k + 1) * power;
  }
  return {sum, slope};
}

void add_group(std::span<const double> p, int g, const std::array<std::uint8_t, kPolarReach>& n, PolarParts& parts) {
  const auto at = [&](int i) { return p[static_cast<std::size_t>(i)]; };
  const double alpha = at(kp::polar_alpha + g) * n[0];
  if (g < kHalogenGroups) {
    const std::size_t kind = g > 0;
    parts.halogens[kind] += alpha;
    parts.halogen_count[kind] += n[0];
  } else {
    parts.alpha += alpha;
  }
  double field = 0, factor = 1;
  for (std::size_t d = 1; d < n.size(); ++d, factor *= at(kp::decay)) field += n[d] * factor;
  parts.beyond += at(kp::polar_beyond + g) * field;
}

}  // namespace

PolarParts polar_parts(std::span<const double> p, const RateSite& s) {
  const auto at = [&](int i) { return p[static_cast<std::size_t>(i)]; };
  PolarParts parts;
  for (auto left = s.present; left != 0; left &= left - 1) {
    const int g = std::countr_zero(left);
    add_group(p, g, s.count[static_cast<std::size_t>(g)], parts);
  }
  const auto on_centre = [&](PolarGroup g) { return static_cast<int>(s.count[static_cast<std::size_t>(g)][0]); };
  for (const auto g : kWithdrawingGroups) parts.withdrawing += on_centre(g);
  const int drawing_carbons = parts.withdrawing - on_centre(PolarGroup::nitro);
  parts.alkyls = std::max(0, s.carbons - drawing_carbons - on_centre(PolarGroup::aryl) - on_centre(PolarGroup::unsaturated));
  for (int k = 0; k < parts.alkyls; ++k) parts.screen *= at(kp::screen);
  parts.screen_beyond = parts.alkyls > 0 ? parts.screen / at(kp::screen) : 1.0;
  parts.plain = !acted_on(s);
  std::tie(parts.carbons, parts.d_carbons) = repeated(s.carbons, at(parts.plain ? kp::plain_repeat : kp::alkyl_repeat));
  std::tie(parts.branches, parts.d_branches) = repeated(s.carbons - 1, at(kp::a_branch_repeat));
  for (std::size_t kind = 0; kind < 2; ++kind) {
    const int n = parts.halogen_count[kind];
    if (n == 0) continue;
    const auto [sum, slope] = repeated(n, at(kp::repeat + static_cast<int>(kind)));
    parts.repeat[kind] = sum / n;
    parts.d_repeat[kind] = slope / n;
    parts.alpha += parts.repeat[kind] * parts.halogens[kind];
  }
  if (parts.all_halogens() > 0) parts.alpha += at(kp::captive) * parts.withdrawing;
  if (s.oxygens > 0) {
    parts.free = 1 / (1 + at(kp::tie) * s.far_halogens / s.oxygens);
    parts.field = at(kp::oxygen_field) * parts.free + (1 - parts.free);
  }
  const bool acyl = is_acyl(s.a_class);
  if (acyl) parts.field = at(kp::acyl_field);
  const int donors = std::max(0, s.carbons - drawing_carbons) + on_centre(PolarGroup::nitrogen) + on_centre(PolarGroup::sulfur);
  if (donors == 0 && !acyl) parts.bare = s.oxygens > 0 ? 1 - parts.free : 1.0;
  parts.sum = parts.screen * parts.alpha + parts.screen_beyond * parts.field * parts.beyond;
  if (parts.sum != 0) parts.left = std::exp(-parts.sum / at(kp::saturation));
  return parts;
}

double polar_energy(std::span<const double> p, const PolarParts& parts) {
  return p[kp::alkyl] * parts.carbons + p[kp::bare] * parts.bare + p[kp::saturation] * (1 - parts.left);
}

namespace {

double shift_of(std::span<const double> p, const RateSite& s, const PolarParts& parts) {
  const auto at = [&](int i) { return p[static_cast<std::size_t>(i)]; };
  double h = at(kp::shift);
  if (const int c = static_cast<int>(s.a_class); c > 0) h += parts.free * at(kp::shift_class + c - 1);
  if (s.oxygens > 0) {
    h += (1 - parts.free) * at(kp::tied_shift) + at(kp::fluoro_ether) * s.count[static_cast<std::size_t>(PolarGroup::fluorine)][0];
  }
  if (is_acyl(s.a_class)) h += at(kp::acyl_halide) * parts.all_halogens();
  if (parts.withdrawing == 0) return h;
  for (int k = 0; k < kWithdrawing; ++k) {
    h += at(kp::unfelt + k) * s.count[static_cast<std::size_t>(kWithdrawingGroups[static_cast<std::size_t>(k)])][0];
  }
  return h;
}

}  // namespace

SiteRate site_rate(std::span<const double> p, const KineticForm& form, const RateSite& s, double dh, double temperature) {
  const auto at = [&](int i) { return p[static_cast<std::size_t>(i)]; };
  const int c = static_cast<int>(s.a_class);
  SiteRate r;
  r.parts = polar_parts(p, s);
  r.polar = polar_energy(p, r.parts);
  r.shift = shift_of(p, s, r.parts);
  double x = dh + r.shift;
  if (!form.polar_outside) x += r.polar;
  r.effective = x;
  const double root = std::sqrt(x * x + 4 * at(kp::width) * at(kp::width));
  r.barrier = 0.5 * (x + root) + (form.polar_outside ? r.polar : 0.0);
  r.position = 0.5 * (1 + x / root);
  r.ln_a = at(kp::ln_a) + (c > 0 ? r.parts.free * at(kp::a_class + c - 1) : 0.0) - at(kp::tightness) * r.position +
           at(kp::a_alkyl) * s.carbons + at(kp::a_branch) * r.parts.branches + at(kp::a_quaternary) * s.quaternary +
           at(kp::exponent) * std::log(temperature / 298.0);
  r.ln_k = r.ln_a - r.barrier / (kGasConstant * temperature);
  return r;
}

double encounter_limit(std::span<const double> p, int heavy_atoms) {
  return std::exp(p[kp::ln_limit] + p[kp::limit_power] * std::log(static_cast<double>(heavy_atoms)));
}

double limited_total(double sum, double limit) {
  const double q = sum / limit;
  return sum / std::cbrt(1 + q * q * q);
}

}  // namespace halostep
