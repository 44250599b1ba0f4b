// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <string>
#include <vector>

#include "cli/program.hpp"

/// What every test of a refusal needs: the whole message on standard error, nothing on standard output, the
/// exit status of the table in the help pages, and no file written.

namespace bandwright::cli_tests {

using Arguments = std::vector<std::string>;

/// The tiny set with a model already built; `expect_refused` states what must not work.
class Refusals : public ::testing::Test {
 protected:
  void SetUp() override {
    scratch.add_tiny();
    ASSERT_EQ(run(scratch, {"calibrate", "plan.toml", "--out", "model.json", "--quiet"}).status, 0);
  }

  void expect_refused(const Arguments& arguments, int status, const std::string& message) {
    const std::vector<std::string> before = scratch.names();
    const Outcome got = run(scratch, arguments);
    EXPECT_EQ(got.status, status);
    EXPECT_EQ(got.out, "");
    EXPECT_EQ(got.err, "bandwright: " + message + "\n");
    EXPECT_EQ(scratch.names(), before);
  }

  /// A plan like the tiny one with `from` replaced by `to`.
  void write_plan(const std::string& name, const std::string& from, const std::string& to) {
    const std::string plan = scratch.read("plan.toml");
    ASSERT_THAT(plan, ::testing::HasSubstr(from));
    scratch.write(name, replaced(plan, from, to));
  }

  Scratch scratch;
};

}  // namespace bandwright::cli_tests
