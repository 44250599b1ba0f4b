// SPDX-License-Identifier: Apache-2.0
#include "cli/version.hpp"

#include <fmt/core.h>

#include <CLI/Version.hpp>
#include <Eigen/Core>
#include <nlohmann/json.hpp>

#include "numerics/decompositions.hpp"
#include "numerics/linear_algebra.hpp"

namespace bandwright::cli {

std::string version_number() { return BANDWRIGHT_VERSION; }

std::string version_line() { return "bandwright " + version_number() + "\n"; }

std::string version_document() {
  const LinearAlgebraInfo info = linear_algebra_info();
  const nlohmann::ordered_json json = {
      {"format", 1},
      {"tool", {{"name", "bandwright"}, {"version", version_number()}}},
      {"libraries",
       {{"eigen", fmt::format("{}.{}.{}", EIGEN_WORLD_VERSION, EIGEN_MAJOR_VERSION, EIGEN_MINOR_VERSION)},
        {"fmt", fmt::format("{}.{}.{}", FMT_VERSION / 10000, FMT_VERSION / 100 % 100, FMT_VERSION % 100)},
        {"nlohmann_json", fmt::format("{}.{}.{}", NLOHMANN_JSON_VERSION_MAJOR, NLOHMANN_JSON_VERSION_MINOR,
                                      NLOHMANN_JSON_VERSION_PATCH)},
        {"cli11", CLI11_VERSION},
        {"armadillo", armadillo_version()}}},
      {"linear_algebra",
       {{"library", info.library}, {"kernel", info.kernel}, {"safe_for_threads", info.many_callers}}}};
  return json.dump() + "\n";
}

}  // namespace bandwright::cli
