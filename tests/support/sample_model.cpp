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

namespace {

constexpr std::string_view kTinyPlan = R"([standards]
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
)";

Provenance provenance_of(std::string_view plan_text) {
  Provenance provenance{.plan_name = "plan.toml",
                        .plan_text = std::string(plan_text),
                        .inputs = {{"spectra", "spectra.csv", sha256("spectra")},
                                   {"reference values", "reference.csv", sha256("reference")}},
                        .id = {},
                        .written_by = "0.1.0"};
  provenance.id = model_id(provenance);
  return provenance;
}

/// The points first .. first + count - 1 alone.
SpectraSet cropped(SpectraSet spectra, Index first, Index count) {
  spectra.axis = Axis(spectra.axis.positions().segment(first, count), spectra.axis.unit());
  spectra.values = Matrix(spectra.values.middleCols(first, count));
  return spectra;
}

}  // namespace

Model model_of(std::string_view plan_text, const SpectraSet& spectra, const ReferenceTable& reference) {
  WorkerPool pool(1);
  Model model = build_model(parse_plan(plan_text, "plan.toml").recipe, spectra, reference, pool);
  model.provenance = provenance_of(plan_text);
  return model;
}

Model build_sample_model() {
  const OpenData& data = beerlambert4();
  std::vector<Index> with_reference = data.training;
  with_reference.push_back(data.test.front());  // without spectrum: gives a warning
  return model_of(kSamplePlan, data.spectra_set(data.training), data.reference_table(with_reference));
}

const Model& sample_model() {
  static const Model model = build_sample_model();
  return model;
}

const Model& tiny_model() {
  static const Model model = [] {
    const OpenData& data = beerlambert4();
    const std::vector<Index> eight(data.training.begin(), data.training.begin() + 8);
    const Index at_1728 = 18;
    return model_of(kTinyPlan, cropped(data.spectra_set(eight), at_1728, 10), data.reference_table(eight));
  }();
  return model;
}

}  // namespace bandwright
