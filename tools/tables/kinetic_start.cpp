// Starting values of the fits, which are prior means, and prior deviations.
#include <cmath>

#include "tables/fit_kinetics.hpp"

namespace halostep {
namespace {

constexpr int kF = 0, kCl = 1;

struct Priors {
  KineticStart k;
  void set(int i, double v, double sd) {
    k.start[static_cast<std::size_t>(i)] = v;
    k.prior[static_cast<std::size_t>(i)] = sd;
  }
  void fix(int i, double v) { set(i, v, 1e-6); }
};

bool withdraws(int group) {
  for (const auto g : kWithdrawingGroups) {
    if (static_cast<int>(g) == group) return true;
  }
  return false;
}

// Most rows are chlorine's.
void chlorine(Priors& q) {
  q.set(kp::ln_a, std::log(4e-11), 0.5);
  q.set(kp::tightness, 2.0, 1.0);
  q.set(kp::exponent, -0.4, 0.3);
  q.set(kp::shift, 2.0, 3.0);
  q.set(kp::width, 5.0, 1.0);
  q.set(kp::alkyl, -2.0, 3.0);
  q.set(kp::alkyl_repeat, 0.2, 0.05);
  q.set(kp::bare, 2.0, 3.0);
  q.set(kp::plain_repeat, 0.2, 0.05);
  q.set(kp::a_branch, 0.0, 0.5);
  q.set(kp::a_branch_repeat, 0.2, 0.1);
  q.set(kp::a_quaternary, 0.0, 0.2);
  q.set(kp::saturation, 40.0, 20.0);
  q.set(kp::screen, 0.6, 0.2);
  q.set(kp::repeat, 1.0, 0.3);
  q.set(kp::repeat + 1, 0.7, 0.2);
  q.set(kp::captive, -4.0, 4.0);
  q.set(kp::tie, 1.0, 0.3);
  q.set(kp::tied_shift, 10.0, 5.0);
  q.set(kp::oxygen_field, 0.6, 0.2);
  q.set(kp::acyl_field, 0.4, 0.2);
  q.set(kp::fluoro_ether, 10.0, 8.0);
  q.set(kp::acyl_halide, 5.0, 8.0);
  for (int k = 0; k < kWithdrawing; ++k) q.set(kp::unfelt + k, 28.0, 6.0);
  for (int g = 0; g < kPolarGroups; ++g) {
    q.set(kp::polar_alpha + g, withdraws(g) ? 8.0 : conjugates(g) ? 0.0 : 6.0, 6.0);
    q.set(kp::polar_beyond + g, 3.0, 6.0);
  }
  q.set(kp::shift_class + static_cast<int>(AClass::acyl) - 1, 15.0, 4.0);
}

// The others have few rows and lean on chlorine's groups: `scale` of its energies, `unfelt` of what its early
// transition state does not feel.
void like_chlorine(Priors& q, const std::vector<double>& cl, double scale, double unfelt, double conjugating) {
  const auto at = [&](int i) { return cl[static_cast<std::size_t>(i)]; };
  q.set(kp::saturation, at(kp::saturation), 3.0);
  q.set(kp::screen, at(kp::screen), 0.1);
  q.set(kp::bare, 0.0, 1.0);
  for (int k = 0; k < 2; ++k) q.set(kp::repeat + k, at(kp::repeat + k), 0.2);
  q.set(kp::captive, scale * at(kp::captive), 2.0);
  q.set(kp::tie, at(kp::tie), 0.2);
  q.set(kp::tied_shift, at(kp::tied_shift), 5.0);
  q.set(kp::oxygen_field, at(kp::oxygen_field), 0.1);
  q.set(kp::acyl_field, at(kp::acyl_field), 0.1);
  q.set(kp::fluoro_ether, at(kp::fluoro_ether), 5.0);
  q.set(kp::acyl_halide, at(kp::acyl_halide), 5.0);
  for (int k = 0; k < kWithdrawing; ++k) q.set(kp::unfelt + k, unfelt * at(kp::unfelt + k), 5.0);
  for (int g = 0; g < kPolarGroups; ++g) {
    q.set(kp::polar_alpha + g, scale * at(kp::polar_alpha + g), conjugates(g) ? conjugating : 3.0);
    q.set(kp::polar_beyond + g, scale * at(kp::polar_beyond + g), 3.0);
  }
}

void fluorine(Priors& q, const std::vector<double>& cl) {
  like_chlorine(q, cl, 0.35, 1.0, 3.0);
  q.set(kp::ln_a, std::log(5e-11), 1.0);
  for (int k = 0; k < 2; ++k) q.set(kp::repeat + k, 1.0, 0.1);
  q.fix(kp::alkyl_repeat, 1.0);
  q.fix(kp::tightness, 0.0);
  q.set(kp::exponent, 0.5, 0.3);
  q.fix(kp::shift, 0.0);
  q.set(kp::width, 16.0, 5.0);
  q.set(kp::ln_limit, std::log(4e-10), 0.5);
  q.set(kp::alkyl, 0.0, 1.0);
}

// The late transition states of Br and I loosen with each alkyl group and may feel conjugation otherwise than
// chlorine's early ones.
void late(Priors& q, const std::vector<double>& cl) {
  like_chlorine(q, cl, 1.0, 0.5, 8.0);
  q.set(kp::ln_a, std::log(6e-11), 1.0);
  q.fix(kp::tightness, 0.0);
  q.set(kp::exponent, 0.3, 0.2);
  q.set(kp::shift, 3.0, 6.0);
  q.set(kp::width, 3.0, 1.5);
  q.set(kp::alkyl, -3.0, 6.0);
  q.fix(kp::alkyl_repeat, 1.0);
  q.set(kp::a_alkyl, 0.0, 0.5);
  // Where the odd electron spreads into a pi system the group stops turning: about 15 to 20 J/(mol K) per rotor.
  q.set(kp::a_class + static_cast<int>(AClass::benzylic) - 1, -2.0, 1.5);
  q.set(kp::a_class + static_cast<int>(AClass::allylic) - 1, -2.0, 1.5);
  q.set(kp::a_class + static_cast<int>(AClass::acyl) - 1, -1.0, 1.0);
}

}  // namespace

KineticStart kinetic_start(int carrier, const std::vector<double>* cl) {
  Priors q;
  q.k.start.assign(kp::total, 0.0);
  q.k.prior.assign(kp::total, 1e-6);
  q.k.form.polar_outside = true;
  q.set(kp::decay, 0.45, 0.03);
  q.set(kp::ln_limit, std::log(2e-10), 0.5);
  q.fix(kp::a_branch_repeat, 1.0);
  q.fix(kp::plain_repeat, 1.0);
  q.set(kp::limit_power, 0.45, 0.15);
  for (int c = 1; c < kAClasses; ++c) {
    q.set(kp::a_class + c - 1, 0.0, 0.7);
    q.set(kp::shift_class + c - 1, 0.0, 4.0);
  }
  if (carrier == kCl || cl == nullptr)
    chlorine(q);
  else if (carrier == kF)
    fluorine(q, *cl);
  else
    late(q, *cl);
  return q.k;
}

}  // namespace halostep
