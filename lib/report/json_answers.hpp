// One answer as a JSON object.
#pragma once
#include "json_parts.hpp"

namespace halostep {

Json json_bond(const Table& table, const BondAnswer& bond);
Json json_step(const Table& table, const StepAnswer& step);
Json json_halogen(const Table& table, const HalogenOutcome& outcome);
Json json_comparison(const Comparison& comparison);

}  // namespace halostep
