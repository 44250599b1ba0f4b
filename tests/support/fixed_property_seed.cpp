// SPDX-License-Identifier: Apache-2.0
// Property tests draw the same cases in every run, unless RC_PARAMS is set by hand: no test may fail by
// luck. A failure prints the text that reproduces it.
#include <cstdlib>

namespace {
[[maybe_unused]] const int kSeedIsFixed = setenv("RC_PARAMS", "seed=42 max_success=100", 0);
}
