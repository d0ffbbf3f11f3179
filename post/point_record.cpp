#include "post/point_record.h"

#include <fmt/format.h>

#include <cmath>
#include <limits>
#include <nlohmann/json.hpp>
#include <stdexcept>
#include <type_traits>
#include <vector>

#include "post/whole_file.h"

namespace falcate::post {
namespace {

using Json = nlohmann::ordered_json;

constexpr const char* kind = "falcate point";
constexpr int version = 3;

// One walk over the fields of each structure serves both ways: `a` reads or writes.

template <class Archive>
void fields(Archive& a, StreamState& s) {
  a("angle_deg", s.angle_deg);
  a("mach", s.mach);
  a("velocity_m_s", s.velocity_m_s);
  a("pressure_pa", s.pressure_pa);
  a("total_pressure_pa", s.total_pressure_pa);
  a("total_temperature_k", s.total_temperature_k);
}

template <class Archive>
void fields(Archive& a, PassageFigures& f) {
  a("inlet", f.inlet);
  a("exit", f.exit);
  a("turning_deg", f.turning_deg);
  a("mass_flow_kg_s_m", f.mass_flow_kg_s_m);
  a("tangential_force_n_m", f.tangential_force_n_m);
  a("axial_force_n_m", f.axial_force_n_m);
  a("momentum_tangential_n_m", f.momentum_tangential_n_m);
  a("momentum_axial_n_m", f.momentum_axial_n_m);
  a("mass_imbalance", f.mass_imbalance);
  a("total_pressure_loss", f.total_pressure_loss);
  a("absolute_exit_velocity_m_s", f.absolute_exit_velocity_m_s);
  a("capacity_ratio", f.capacity_ratio);
  a("blade_efficiency", f.blade_efficiency);
  a("wheel_efficiency", f.wheel_efficiency);
  a("tangential_force_n", f.tangential_force_n);
  a("axial_force_n", f.axial_force_n);
  a("torque_n_m", f.torque_n_m);
  a("power_w", f.power_w);
  a("supply_power_w", f.supply_power_w);
  a("nozzle_loss_w", f.nozzle_loss_w);
  a("spill_loss_w", f.spill_loss_w);
  a("entry_loss_w", f.entry_loss_w);
  a("blade_loss_w", f.blade_loss_w);
  a("leaving_loss_w", f.leaving_loss_w);
}

template <class Archive>
void fields(Archive& a, NumericalError& e) {
  fields(a, static_cast<PassageFigures&>(e));
  a("basis", e.basis);
}

template <class Archive>
void fields(Archive& a, SurfacePoint& p) {
  a("x", p.x);
  a("y", p.y);
  a("arc_length", p.arc_length);
  a("pressure_pa", p.pressure_pa);
  a("isentropic_mach", p.isentropic_mach);
}

template <class Archive>
void fields(Archive& a, solver::ConvergencePoint& p) {
  a("step", p.step);
  a("residual", p.residual);
  a("cfl", p.cfl);
  a("krylov_iterations", p.krylov_iterations);
}

template <class Archive>
void fields(Archive& a, solver::SteadySummary& s) {
  a("status", s.status);
  a("reason", s.reason);
  a("residual_drop", s.residual_drop);
  a("newton_steps", s.newton_steps);
  a("krylov_iterations", s.krylov_iterations);
  a("residual_evaluations", s.residual_evaluations);
  a("seconds", s.seconds);
  a("history", s.history);
}

template <class Archive>
void fields(Archive& a, PointResult& p) {
  a("id", p.id);
  a("shape", p.shape);
  a("wheel", p.wheel);
  a("speed_rpm", p.speed_rpm);
  a("blade_speed_m_s", p.blade_speed_m_s);
  a("speed_ratio", p.speed_ratio);
  a("figures", p.figures);
  a("numerical_error", p.numerical_error);
  a("suction", p.suction);
  a("pressure", p.pressure);
  a("solution", p.solution);
  a("cells", p.cells);
  a("seconds", p.seconds);
  a("failure", p.failure);
  a("remarks", p.remarks);
}

template <class T>
constexpr bool is_vector = false;
template <class T>
constexpr bool is_vector<std::vector<T>> = true;
template <class T>
constexpr bool is_plain = std::is_integral_v<T> || std::is_same_v<T, std::string>;

struct Writer {
  Json& json;

  template <class T>
  void operator()(const char* key, T& value) {
    json[key] = written(value);
  }

  template <class T>
  static Json written(T& value) {
    if constexpr (std::is_same_v<T, double>) {
      return std::isfinite(value) ? Json(value)
                                  : Json(fmt::format("{}", std::isnan(value) ? NAN : value));
    } else if constexpr (is_plain<T>) {
      return value;
    } else if constexpr (std::is_same_v<T, solver::SolutionStatus>) {
      return status_words(value);
    } else if constexpr (is_vector<T>) {
      Json list = Json::array();
      for (auto& item : value) list.push_back(written(item));
      return list;
    } else {
      Json object = Json::object();
      Writer inner{object};
      fields(inner, value);
      return object;
    }
  }
};

struct Reader {
  const Json& json;

  template <class T>
  void operator()(const char* key, T& value) {
    read(json.at(key), value);
  }

  template <class T>
  static void read(const Json& from, T& value) {
    if constexpr (std::is_same_v<T, double>) {
      value = from.is_string() ? not_finite(from.get<std::string>()) : from.get<double>();
    } else if constexpr (is_plain<T>) {
      value = from.get<T>();
    } else if constexpr (std::is_same_v<T, solver::SolutionStatus>) {
      value = status_from_words(from.get<std::string>());
    } else if constexpr (is_vector<T>) {
      value.clear();
      for (const Json& item : from) {
        value.emplace_back();
        read(item, value.back());
      }
    } else {
      Reader inner{from};
      fields(inner, value);
    }
  }

  static double not_finite(const std::string& text) {
    if (text == "nan") return std::numeric_limits<double>::quiet_NaN();
    if (text == "inf") return std::numeric_limits<double>::infinity();
    if (text == "-inf") return -std::numeric_limits<double>::infinity();
    throw std::invalid_argument(fmt::format("'{}' is not a number", text));
  }
};

}  // namespace

const char* status_words(solver::SolutionStatus status) {
  switch (status) {
    case solver::SolutionStatus::steady:
      return "steady";
    case solver::SolutionStatus::averaged:
      return "averaged";
    case solver::SolutionStatus::failed:
      return "failed";
  }
  return "";
}

solver::SolutionStatus status_from_words(const std::string& words) {
  for (const auto status : {solver::SolutionStatus::steady, solver::SolutionStatus::averaged,
                            solver::SolutionStatus::failed})
    if (words == status_words(status)) return status;
  throw std::invalid_argument(fmt::format("'{}' is not a solution status", words));
}

void write_point_record(const PointResult& point, const std::string& path) {
  PointResult copy = point;  // the walk is written once, for reading too
  Json record = {{"kind", kind}, {"version", version}};
  record["point"] = Writer::written(copy);
  write_whole_file(path, record.dump(1, ' ', false, Json::error_handler_t::replace) + '\n');
}

PointResult read_point_record(const std::string& path) {
  const std::string text = read_whole_file(path);
  PointResult point;
  try {
    const Json record = Json::parse(text);
    if (record.at("kind") != kind) throw std::invalid_argument("of another kind");
    if (record.at("version") != version) throw std::invalid_argument("of another version");
    Reader::read(record.at("point"), point);
  } catch (const std::exception& error) {
    throw OutputError(fmt::format("{}: not a record of a point: {}", path, error.what()));
  }
  return point;
}

}  // namespace falcate::post
