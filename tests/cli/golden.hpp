// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <gtest/gtest.h>

#include <string>

/// Comparison with the files in tests/cli/golden. With BANDWRIGHT_REGENERATE=1 in the environment they are
/// written anew instead, and the test fails, so that nobody takes such a run for a passed one.
///
/// The digest of a model's content differs between processor kernels in its last bits, and the version of
/// the program changes: both are replaced by <digest> and <version> after their form was checked.

namespace bandwright::cli_tests {

/// A table for people: text exact, every number within one unit of its last printed digit.
[[nodiscard]] ::testing::AssertionResult matches_golden_text(const std::string& name,
                                                             const std::string& actual);

/// JSON: keys and texts exact, numbers to 1e-9 of themselves or of the largest number in their list.
[[nodiscard]] ::testing::AssertionResult matches_golden_json(const std::string& name,
                                                             const std::string& actual);

/// CSV with numbers in full: text exact, numbers to 1e-9.
[[nodiscard]] ::testing::AssertionResult matches_golden_csv(const std::string& name,
                                                            const std::string& actual);

/// What the text comparison says of two texts; empty = they agree. Shown for its own tests.
[[nodiscard]] std::string text_difference(const std::string& want, const std::string& got);

/// The same for JSON documents.
[[nodiscard]] std::string json_difference(const std::string& want, const std::string& got);

}  // namespace bandwright::cli_tests
