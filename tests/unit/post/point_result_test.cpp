#include "post/point_result.h"

#include <gtest/gtest.h>

#include <set>
#include <string>

namespace falcate::post {
namespace {

TEST(FigureRows, EachReachesAFigureOfItsOwn) {
  PassageFigures figures;
  double value = 0.0;
  for (const FigureRow& row : figure_rows()) figure_value(row, figures) = ++value;
  value = 0.0;
  const PassageFigures& read = figures;
  for (const FigureRow& row : figure_rows())
    EXPECT_EQ(figure_value(row, read), ++value) << row.group << ' ' << row.key;
}

TEST(FigureRows, KeysAreUniqueAndCarryTheirUnit) {
  std::set<std::string> keys;
  for (const FigureRow& row : figure_rows()) {
    EXPECT_TRUE(keys.insert(std::string(row.group) + '.' + row.key).second) << row.key;
    EXPECT_FALSE(std::string(row.title).empty()) << row.key;
  }
  for (const char* key : {"inlet.angle_deg",
                          "inlet.mach",
                          "inlet.velocity_m_s",
                          "inlet.pressure_pa",
                          "inlet.total_pressure_pa",
                          "inlet.total_temperature_k",
                          "exit.angle_deg",
                          "exit.mach",
                          "exit.velocity_m_s",
                          "exit.pressure_pa",
                          "exit.total_pressure_pa",
                          "exit.total_temperature_k",
                          ".absolute_exit_velocity_m_s",
                          ".turning_deg",
                          ".mass_flow_kg_s_m",
                          ".capacity_ratio",
                          ".total_pressure_loss",
                          "force.tangential_n_m",
                          "force.axial_n_m",
                          "force.tangential_n",
                          "force.axial_n",
                          "efficiency.blade",
                          "efficiency.wheel",
                          ".torque_n_m",
                          ".power_w"})
    EXPECT_EQ(keys.count(key), 1u) << key;
}

}  // namespace
}  // namespace falcate::post
