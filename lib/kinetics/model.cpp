#include "model.hpp"

#include <algorithm>
#include <bit>
#include <cmath>

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
  set(kp::bare, "polar, no alkyl on the centre");
  set(kp::screen, "polar, factor per alkyl on the centre");
  return n;
}

bool conjugates(int group) noexcept {
  switch (static_cast<PolarGroup>(group)) {
    case PolarGroup::carbonyl: case PolarGroup::carboxyl: case PolarGroup::carbonyl_halide: case PolarGroup::cyano:
    case PolarGroup::nitro: case PolarGroup::aryl: case PolarGroup::unsaturated: return true;
    default: return false;
  }
}

PolarParts polar_parts(std::span<const double> p, const RateSite& s) {
  const auto at = [&](int i) { return p[static_cast<std::size_t>(i)]; };
  PolarParts parts;
  int conjugating = 0;
  for (auto left = s.present; left != 0; left &= left - 1) {
    const int g = std::countr_zero(left);
    const auto& n = s.count[static_cast<std::size_t>(g)];
    if (conjugates(g)) {
      conjugating += g == static_cast<int>(PolarGroup::nitro) ? 0 : n[0];
      parts.conjugating += at(kp::polar_alpha + g) * n[0];
    } else {
      parts.alpha += at(kp::polar_alpha + g) * n[0];
    }
    double field = 0, factor = 1;
    for (std::size_t d = 1; d < n.size(); ++d, factor *= at(kp::decay)) field += n[d] * factor;
    parts.beyond += at(kp::polar_beyond + g) * field;
  }
  parts.alkyls = std::max(0, s.carbons - conjugating);
  for (int k = 0; k < parts.alkyls; ++k) parts.screen *= at(kp::screen);
  parts.screen_beyond = parts.alkyls > 0 ? parts.screen / at(kp::screen) : 1.0;
  const double sum = parts.screen * parts.alpha + parts.screen_beyond * parts.beyond;
  if (sum != 0) parts.left = std::exp(-sum / at(kp::saturation));
  parts.sum = sum;
  return parts;
}

double polar_energy(std::span<const double> p, const RateSite& s, const PolarParts& parts) {
  return p[kp::alkyl] * s.carbons + (parts.alkyls == 0 ? p[kp::bare] : 0.0) + parts.screen * parts.conjugating + p[kp::saturation] * (1 - parts.left);
}

SiteRate site_rate(std::span<const double> p, const KineticForm& form, const RateSite& s, double dh, double temperature) {
  const auto at = [&](int i) { return p[static_cast<std::size_t>(i)]; };
  const int c = static_cast<int>(s.a_class);
  SiteRate r;
  r.parts = polar_parts(p, s);
  r.polar = polar_energy(p, s, r.parts);
  double x = dh + at(kp::shift) + (c > 0 ? at(kp::shift_class + c - 1) : 0.0);
  if (!form.polar_outside) x += r.polar;
  r.effective = x;
  const double root = std::sqrt(x * x + 4 * at(kp::width) * at(kp::width));
  r.barrier = 0.5 * (x + root) + (form.polar_outside ? r.polar : 0.0);
  r.position = 0.5 * (1 + x / root);
  r.ln_a = at(kp::ln_a) + (c > 0 ? at(kp::a_class + c - 1) : 0.0) - at(kp::tightness) * r.position +
           at(kp::a_alkyl) * s.carbons +
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
