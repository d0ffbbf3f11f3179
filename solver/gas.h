/// Calorically perfect gas: p = rho R T, constant heat capacities. SI units.
#pragma once

namespace falcate::solver {

struct Gas {
  double heat_capacity_ratio = 1.4;  ///< gamma > 1
  double gas_constant = 287.05;      ///< R, J/(kg K)
};

}  // namespace falcate::solver
