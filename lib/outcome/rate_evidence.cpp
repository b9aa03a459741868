#include "outcome/rate_evidence.hpp"

#include <algorithm>
#include <map>

#include "bonds/locate.hpp"
#include "halostep/engine.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

constexpr std::size_t kShown = 5;

}  // namespace

void RateEvidence::read() const {
  for (const auto& r : table_.rates) {
    if (r.superseded || !r.fitted || r.carrier.empty()) continue;
    const auto x = parse_halogen(r.carrier);
    const auto m = parse_smiles(r.molecule, ParseMode::species);
    if (!x.ok() || !m.ok()) continue;
    Known k{static_cast<int>(x.value()), r.source, canonical_smiles(m.value(), false), {}};
    const auto info = environment(m.value());
    for (const auto& s : hydrogen_sites(m.value(), symmetry_classes(m.value()))) {
      k.classes.push_back(rate_site(m.value(), info, s.atom).a_class);
    }
    known_.push_back(std::move(k));
  }
}

std::vector<int> RateEvidence::sources(int x, const std::string& key, const std::vector<AClass>& classes) const {
  std::call_once(once_, [this] { read(); });
  std::vector<int> own;
  std::map<int, int> votes;
  for (const auto& k : known_) {
    if (k.carrier != x) continue;
    if (k.key == key && std::find(own.begin(), own.end(), k.source) == own.end()) own.push_back(k.source);
    for (const auto c : classes) votes[k.source] += std::find(k.classes.begin(), k.classes.end(), c) != k.classes.end();
  }
  if (!own.empty()) return own;
  std::vector<std::pair<int, int>> order;
  for (const auto& [source, n] : votes) {
    if (n > 0) order.emplace_back(-n, source);
  }
  std::sort(order.begin(), order.end());
  for (std::size_t i = 0; i < std::min(kShown, order.size()); ++i) own.push_back(order[i].second);
  return own;
}

}  // namespace halostep
