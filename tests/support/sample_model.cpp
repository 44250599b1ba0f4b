// SPDX-License-Identifier: Apache-2.0
#include "support/sample_model.hpp"

#include "base/digest.hpp"
#include "base/worker_pool.hpp"
#include "model/build_model.hpp"
#include "records/model_file.hpp"
#include "records/plan.hpp"
#include "support/test_data.hpp"

namespace bandwright {

const std::string_view kSamplePlan = R"(format = 1
title = "Two of four, \"gewürfelt\""

[standards]
spectra = ["spectra.csv"]
reference = "reference.csv"
axis = "cm-1"

[[exclude]]
sample = "S07"
reason = "for the sake of the test"

[[component]]
name = "A"
column = "A [g/L]"
unit = "g/L"
spec_max = 8.5

[[component]]
name = "B"
column = "B [g/L]"
unit = "g/L"
windows = ["ester"]
factors = 3
scaling = "unit-variance"

[[window]]
name = "acid"
from = 1700
to = 1760
except = [[1732, 1740]]

[[window]]
name = "ester"
from = 1400
to = 1340

[pretreatment]
steps = [{ step = "savitzky-golay", points = 5, polynomial = 2, derivative = 1 }, "snv"]

[regression]
factors = "minimum"
max_factors = 6
)";

Model model_of_plan(std::string_view plan_text, std::size_t standards) {
  const OpenData& data = beerlambert4();
  const Plan plan = parse_plan(plan_text, "plan.toml");
  const std::vector<Index> with_spectra(data.training.begin(),
                                        data.training.begin() + static_cast<std::ptrdiff_t>(standards));
  std::vector<Index> with_reference = with_spectra;
  with_reference.push_back(data.test.front());  // without spectrum: gives a warning
  WorkerPool pool(1);
  Model model =
      build_model(plan.recipe, data.spectra_set(with_spectra), data.reference_table(with_reference), pool);
  model.provenance = {.plan_name = "plan.toml",
                      .plan_text = std::string(plan_text),
                      .inputs = {{"spectra", "spectra.csv", sha256("spectra")},
                                 {"reference values", "reference.csv", sha256("reference")}},
                      .id = {},
                      .written_by = "0.1.0"};
  model.provenance.id = model_id(model.provenance);
  return model;
}

const Model& sample_model() {
  static const Model model = model_of_plan(kSamplePlan);
  return model;
}

const Model& tiny_model() {
  static const Model model = model_of_plan(R"([standards]
spectra = ["s.csv"]
reference = "r.csv"
[[component]]
name = "A"
column = "A [g/L]"
factors = 1
[[window]]
name = "w"
from = 1700
to = 1720
[regression]
max_factors = 2
)",
                                           8);
  return model;
}

}  // namespace bandwright
