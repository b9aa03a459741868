// Least-squares adjustment of a network of unknowns tied by linear observations: x unknown enthalpies, each
// observation a sum of a few of them. Names are for the reader only; the numerics see indices.
#pragma once
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "halostep/error.hpp"
#include "halostep/quantity.hpp"

namespace halostep {

struct NetworkTerm {
  int unknown = 0;
  double factor = 1;
};

/// Sum of factor * unknown.
using LinearForm = std::vector<NetworkTerm>;

struct NetworkUnknown {
  std::string name;
  std::optional<double> fixed;  // known exactly: a reference state, a datum
};

struct NetworkObservation {
  std::string name;
  LinearForm terms;
  double value = 0, u = 0;
  int group = -1;  // observations of one group share an error (copies of one measurement); -1: independent
};

struct Network {
  std::vector<NetworkUnknown> unknowns;
  std::vector<NetworkObservation> observations;
};

struct NetworkOptions {
  bool robust = true;
  double huber = 2.0;        // down-weighting begins at this |residual|/u (Huber, Ann. Math. Stat. 1964, 35, 73)
  double critical = 3.29;    // |w| of a flagged observation: two-sided 0.1 % (Baarda 1968)
  double correlation = 0.9;  // of the best observations of a group
};

struct ObservationCheck {
  double residual = 0;    // observed - adjusted, without the common error of its group
  double redundancy = 0;  // r: share of an error of the observation that shows in its residual, 0..1
  double w_plain = 0;     // residual / (u sqrt(r)), u without the common part; 0 where nothing checks it
  double w = 0;           // the same against the down-weighted solution
  double weight = 1;      // factor on 1/u^2
  bool flagged = false;   // |w| > critical
};

struct GlobalTest {
  double chi2 = 0;
  int freedom = 0;  // observations - unknowns that are not fixed
  double p = 1;     // chance of a larger chi2 if the u hold
};

struct Adjustment {
  std::vector<double> values;      // one per unknown, fixed ones included
  std::vector<double> covariance;  // row-major, unknowns x unknowns; zero for fixed ones
  std::vector<ObservationCheck> checks;
  std::vector<double> common_u;  // per group: standard deviation of the common error
  GlobalTest plain, weighted;    // before and after down-weighting
  int rounds = 0;                // of reweighting
  bool converged = true;

  [[nodiscard]] Quantity value(std::span<const NetworkTerm> form) const;
  [[nodiscard]] double covariance_of(std::span<const NetworkTerm> a, std::span<const NetworkTerm> b) const;
};

/// Generalised least squares. Observations of one group share an error of standard deviation c, c^2 = correlation times
/// the smallest u^2 of the group: V_ii = u_i^2, V_ij = c^2. Then Huber's reweighting: the part of u_i that is not
/// common is divided by the root of a weight min(1, huber u_i/|v_i|) until the weights stand still. Errors: table (an
/// index out of range, u not above zero, two unknowns of one name, unknowns that the observations do not determine: the
/// message names them).
Result<Adjustment> adjust_network(const Network& network, const NetworkOptions& options = {});

/// The network with one more observation. It is solved anew: sparse, so well under a second for a thousand unknowns.
Result<Adjustment> with_observation(const Network& network, const NetworkObservation& extra,
                                    const NetworkOptions& options = {});

/// Unknowns connected by observations (this and the next take indices to be in range); each part in order of its first
/// unknown. Fixed unknowns tie nothing together (a value that cannot move passes nothing on) and are in no part.
std::vector<std::vector<int>> network_parts(const Network& network);

/// Combinations of unknowns the observations leave open: the unknowns in each. Empty for a network that can be solved.
/// A set of observations that fix only differences leaves its level open.
std::vector<std::vector<int>> undetermined(const Network& network);

}  // namespace halostep
