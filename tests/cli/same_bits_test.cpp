// SPDX-License-Identifier: Apache-2.0
// The same bytes for any number of threads, any company of other spectra, any locale, any repetition.
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

#include "cli/program.hpp"

namespace bandwright::cli_tests {
namespace {

using Json = nlohmann::ordered_json;

class SameBits : public ::testing::Test {
 protected:
  void SetUp() override { scratch.add_meats(); }

  /// Calibrates into `name`; returns what --json printed, with the file's name taken out.
  std::string calibrate(const std::string& name, const std::string& threads, const RunOptions& options = {}) {
    const Outcome got =
        run(scratch, {"calibrate", "plan.toml", "--out", name, "--json", "--threads", threads}, options);
    EXPECT_EQ(got.status, 0) << got.err;
    return replaced(got.out, "\"file\":\"" + name + "\"", "\"file\":\"\"");
  }

  Scratch scratch;
};

TEST_F(SameBits, CalibrateWithOneTwoAndFourThreads) {
  const std::string one = calibrate("one.json", "1");
  EXPECT_EQ(calibrate("two.json", "2"), one);
  EXPECT_EQ(calibrate("four.json", "4"), one);
  const std::string model = scratch.read("one.json");
  EXPECT_TRUE(scratch.read("two.json") == model);
  EXPECT_TRUE(scratch.read("four.json") == model);
}

TEST_F(SameBits, CalibrateTwice) {
  calibrate("first.json", "2");
  calibrate("second.json", "2");
  EXPECT_TRUE(scratch.read("first.json") == scratch.read("second.json"));
}

TEST_F(SameBits, LocaleAndEnvironmentChangeNothing) {
  const std::string plain = calibrate("plain.json", "2");
  const std::string german = calibrate("german.json", "2",
                                       {.environment = {{"LC_ALL", "de_DE.UTF-8"},
                                                        {"LANG", "de_DE.UTF-8"},
                                                        {"LANGUAGE", "de"},
                                                        {"TZ", "Asia/Tokyo"},
                                                        {"COLUMNS", "20"}}});
  EXPECT_EQ(german, plain);
  EXPECT_TRUE(scratch.read("german.json") == scratch.read("plain.json"));
}

TEST_F(SameBits, PredictAndValidateWithOneTwoAndFourThreads) {
  calibrate("model.json", "2");
  for (const std::vector<std::string>& arguments :
       {std::vector<std::string>{"predict", "model.json", "new_spectra.csv", "--json"},
        std::vector<std::string>{"validate", "model.json", "--json"}}) {
    std::vector<std::string> outputs;
    for (const std::string threads : {"1", "2", "4"}) {
      std::vector<std::string> with_threads = arguments;
      with_threads.insert(with_threads.end(), {"--threads", threads});
      outputs.push_back(run(scratch, with_threads).out);
    }
    EXPECT_FALSE(outputs[0].empty());
    EXPECT_EQ(outputs[1], outputs[0]);
    EXPECT_EQ(outputs[2], outputs[0]);
  }
}

TEST_F(SameBits, OneSpectrumAloneEqualsItselfAmongAThousand) {
  constexpr std::size_t kSpectra = 1000;
  calibrate("model.json", "2");
  const std::string csv = scratch.read("new_spectra.csv");
  const std::string heading = csv.substr(0, csv.find('\n') + 1);
  std::vector<std::string> rows;  // without their ids
  for (std::size_t at = heading.size(); at < csv.size();) {
    const std::size_t end = csv.find('\n', at) + 1;
    rows.push_back(csv.substr(csv.find(',', at), end - csv.find(',', at)));
    at = end;
  }
  std::string many = heading;
  for (std::size_t i = 0; i < kSpectra; ++i) many += "n" + std::to_string(i) + rows[i % rows.size()];
  scratch.write("many.csv", many);
  const Json among = Json::parse(run(scratch, {"predict", "model.json", "many.csv", "--json"}).out);
  ASSERT_EQ(among["results"].size(), kSpectra);
  // Positions that begin, fill and end a block of any likely width, and the last one of all.
  for (const std::size_t i : {0U, 1U, 31U, 32U, 33U, 500U, 998U, 999U}) {
    const std::string id = "n" + std::to_string(i);
    scratch.write("alone.csv", heading + id + rows[i % rows.size()]);
    const Json alone = Json::parse(run(scratch, {"predict", "model.json", "alone.csv", "--json"}).out);
    EXPECT_EQ(alone["results"][0].dump(), among["results"][i].dump()) << id;
    EXPECT_EQ(alone["samples"][0].dump(), among["samples"][i].dump()) << id;
  }
}

}  // namespace
}  // namespace bandwright::cli_tests
