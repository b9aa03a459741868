#include "gradient.hpp"

#include <bit>
#include <cmath>

#include "halostep/quantity.hpp"

namespace halostep {

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
  out.reserve(20);
  out = {{kp::ln_a, 1.0},
         {kp::tightness, -at.position},
         {kp::exponent, std::log(temperature / 298.0)},
         {kp::shift, slope},
         {kp::width, par(kp::tightness) * 2 * x * w / root3 - 2 * w / (root * rt)},
         {kp::alkyl, polar * s.carbons},
         {kp::a_alkyl, static_cast<double>(s.carbons)}};
  if (const int c = static_cast<int>(s.a_class); c > 0) {
    out.push_back({kp::a_class + c - 1, 1.0});
    out.push_back({kp::shift_class + c - 1, slope});
  }
  const auto& parts = at.parts;
  const double limit = par(kp::saturation), q = parts.sum / limit, group = polar * parts.left;
  double by_decay = 0;
  for (auto present = s.present; present != 0; present &= present - 1) {
    const int k = std::countr_zero(present);
    const auto& n = s.count[static_cast<std::size_t>(k)];
    if (n[0]) out.push_back({kp::polar_alpha + k, (conjugates(k) ? polar : group) * parts.screen * n[0]});
    double field = 0, derivative = 0, factor = 1, below = 0;
    for (std::size_t d = 1; d < n.size(); ++d) {
      field += n[d] * factor;
      derivative += n[d] * below;
      below = static_cast<double>(d) * factor;  // d(decay^d) / d(decay)
      factor *= par(kp::decay);
    }
    if (field == 0) continue;
    out.push_back({kp::polar_beyond + k, group * parts.screen_beyond * field});
    by_decay += par(kp::polar_beyond + k) * derivative;
  }
  if (by_decay != 0) out.push_back({kp::decay, group * parts.screen_beyond * by_decay});
  if (q != 0) out.push_back({kp::saturation, polar * (1 - parts.left * (1 + q))});
  if (parts.alkyls == 0) out.push_back({kp::bare, polar});
  if (parts.alkyls > 0) {
    const double per_alpha = parts.alkyls * parts.screen / par(kp::screen);
    const double per_beyond = (parts.alkyls - 1) * parts.screen_beyond / par(kp::screen);
    out.push_back({kp::screen, polar * per_alpha * parts.conjugating + group * (per_alpha * parts.alpha + per_beyond * parts.beyond)});
  }
  return g;
}

}  // namespace halostep
