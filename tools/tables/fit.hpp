// All fits of the table in their fixed order.
#pragma once
#include <vector>

#include "halostep/tables.hpp"

namespace halostep {

/// bonds, exchange.F/Cl/Br/I, kinetics.Cl, kinetics.F/Br/I, line.F/Cl/Br/I; from the table's rows and entries alone.
/// Errors: those of the solvers.
Result<std::vector<FittedModel>> fit_models(const Table& table);
/// Those of bonds and of the exchange H -> X alone: all that bonds() needs.
Result<std::vector<FittedModel>> fit_bond_models(const Table& table);

}  // namespace halostep
