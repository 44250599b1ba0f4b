// SPDX-License-Identifier: Apache-2.0
// The rules of the house, checked on the text of the sources: which room may include which, where heavy
// headers and the file system belong, and that every file names its licence.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <map>
#include <set>
#include <string>
#include <string_view>
#include <vector>

namespace {

using ::testing::ElementsAre;
using ::testing::HasSubstr;
using ::testing::IsEmpty;

const std::filesystem::path kProject = std::filesystem::path(BANDWRIGHT_TEST_DATA) / ".." / "..";

/// The house from the top down. A room may include rooms of the rows below its own and itself, and nothing
/// of its own row.
const std::vector<std::vector<std::string>> kRooms{
    {"cli"},
    {"report", "records", "formats"},
    {"survey", "revalidation"},
    {"validation"},
    {"prediction"},
    {"model"},
    {"resampling"},
    {"calibration"},
    {"regression", "pretreatment", "correction"},
    {"spectra"},
    {"numerics"},
    {"base"},
};

/// Rooms that may use less than everything below.
const std::map<std::string, std::set<std::string>> kOnly{{"formats", {"spectra", "base"}}};

/// A header of another library, or of the system, that has its places.
struct Place {
  std::string header;               ///< how the name in <...> begins
  std::vector<std::string> places;  ///< how the path of a file that may include it begins
  bool in_headers;                  ///< else only in .cpp files
};
const std::vector<Place> kPlaces{
    {"toml++/", {"records/toml_wrapper.hpp"}, true},  // one definition rule: always with the same settings
    {"armadillo", {"numerics/"}, false},
    {"cblas.h", {"numerics/"}, false},
    {"lapack", {"numerics/"}, false},
    {"boost/", {"numerics/"}, false},
    {"openssl/", {"base/"}, false},
    {"CLI/", {"cli/"}, true},
    {"nlohmann/json_fwd.hpp", {"records/", "cli/"}, true},
    {"nlohmann/", {"records/", "cli/"}, false},
    {"iostream", {"cli/"}, false},  // the library prints nothing
    {"filesystem", {"formats/", "records/", "cli/"}, false},
    {"fstream", {"formats/", "records/", "cli/"}, false},
    {"clocale", {"cli/"}, false},  // numbers never follow the locale
    {"locale", {"cli/"}, false},
};

std::size_t row_of(const std::string& room) {
  for (std::size_t row = 0; row < kRooms.size(); ++row)
    if (std::find(kRooms[row].begin(), kRooms[row].end(), room) != kRooms[row].end()) return row;
  return kRooms.size();
}

bool is_room(const std::string& room) { return row_of(room) < kRooms.size(); }

/// The part before the slash; empty if there is none.
std::string room_of(const std::string& path) {
  const std::size_t slash = path.find('/');
  return slash == std::string::npos ? std::string() : path.substr(0, slash);
}

bool may_include(const std::string& from, const std::string& to) {
  if (from == to) return true;
  const auto only = kOnly.find(from);
  if (only != kOnly.end()) return only->second.contains(to);
  return row_of(to) > row_of(from);
}

/// What is in the quotes or brackets of an #include, with the bracket; empty for other lines.
std::string included(std::string_view line) {
  const auto skip_blanks = [&] { line.remove_prefix(std::min(line.find_first_not_of(" \t"), line.size())); };
  skip_blanks();
  if (!line.starts_with('#')) return {};
  line.remove_prefix(1);
  skip_blanks();
  if (!line.starts_with("include")) return {};
  line.remove_prefix(7);
  skip_blanks();
  const std::size_t end = line.find_first_of("\">", 1);
  return end == std::string_view::npos ? std::string() : std::string(line.substr(0, end));
}

/// What breaks the rules in a file at `path`, relative to src/.
std::vector<std::string> faults_in(const std::string& path, const std::string& text) {
  std::vector<std::string> faults;
  const auto fault = [&](const std::string& what) { faults.push_back(path + ": " + what); };
  const std::string room = room_of(path);
  const bool header = path.ends_with(".hpp");
  if (!is_room(room)) fault("is in no room of the house");
  if (!text.starts_with("// SPDX-License-Identifier: Apache-2.0\n"))
    fault("does not begin with the SPDX line");
  if (header && text.find("\n#pragma once\n") == std::string::npos) fault("has no #pragma once");

  std::size_t begin = 0;
  while (begin < text.size()) {
    const std::size_t end = std::min(text.find('\n', begin), text.size());
    const std::string name = included(std::string_view(text).substr(begin, end - begin));
    begin = end + 1;
    if (name.empty()) continue;
    const std::string target = name.substr(1);
    if (name.front() == '"') {
      const std::string other = room_of(target);
      if (!is_room(other))
        fault("includes \"" + target + "\", which is in no room");
      else if (!may_include(room, other))
        fault("includes \"" + target + "\", against the arrow");
      continue;
    }
    const auto place = std::find_if(kPlaces.begin(), kPlaces.end(),
                                    [&](const Place& p) { return target.starts_with(p.header); });
    if (place == kPlaces.end()) continue;
    const bool here = std::any_of(place->places.begin(), place->places.end(),
                                  [&](const std::string& p) { return path.starts_with(p); });
    if (!here || (header && !place->in_headers)) fault("includes <" + target + "> outside its place");
  }
  return faults;
}

std::string text_of(const std::filesystem::path& path) {
  std::ifstream file(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(file), std::istreambuf_iterator<char>()};
}

/// Sources under a directory of the project, relative to it, in order.
std::vector<std::string> sources_under(const std::filesystem::path& directory) {
  std::vector<std::string> paths;
  for (const auto& entry : std::filesystem::recursive_directory_iterator(directory)) {
    const std::string extension = entry.path().extension().string();
    if (extension == ".hpp" || extension == ".cpp")
      paths.push_back(std::filesystem::relative(entry.path(), directory).generic_string());
  }
  std::sort(paths.begin(), paths.end());
  return paths;
}

std::string file_with(const std::string& line) {
  return "// SPDX-License-Identifier: Apache-2.0\n#pragma once\n" + line + "\n";
}

TEST(House, EverySourceKeepsTheRules) {
  const std::vector<std::string> paths = sources_under(kProject / "src");
  ASSERT_GT(paths.size(), 50u);
  for (const std::string& path : paths)
    EXPECT_THAT(faults_in(path, text_of(kProject / "src" / path)), IsEmpty());
}

TEST(House, TestsBenchmarksAndFuzzTargetsNameTheirLicence) {
  for (const char* directory : {"tests", "bench", "fuzz"})
    for (const std::string& path : sources_under(kProject / directory))
      EXPECT_TRUE(
          text_of(kProject / directory / path).starts_with("// SPDX-License-Identifier: Apache-2.0\n"))
          << directory << "/" << path;
}

TEST(House, EveryUnitTestStandsForAFileOfItsRoom) {
  for (const std::string& path : sources_under(kProject / "tests")) {
    const std::string room = room_of(path);
    if (!path.ends_with("_test.cpp") || room == "house") continue;
    EXPECT_TRUE(is_room(room)) << "tests/" << path;
  }
}

TEST(House, APlantedUpwardArrowIsFound) {
  EXPECT_THAT(faults_in("base/error.hpp", file_with("#include \"model/model.hpp\"")),
              ElementsAre("base/error.hpp: includes \"model/model.hpp\", against the arrow"));
  EXPECT_THAT(faults_in("model/model.cpp", file_with("  #  include \"cli/main.hpp\"")),
              ElementsAre(HasSubstr("against the arrow")));
}

TEST(House, APlantedSidewaysArrowIsFound) {
  EXPECT_THAT(faults_in("regression/pls.cpp", file_with("#include \"pretreatment/snv.hpp\"")),
              ElementsAre(HasSubstr("against the arrow")));
  EXPECT_THAT(faults_in("records/plan.cpp", file_with("#include \"formats/files.hpp\"")),
              ElementsAre(HasSubstr("against the arrow")));
}

TEST(House, FormatsSeeSpectraAndBaseOnly) {
  EXPECT_THAT(faults_in("formats/cells.cpp", file_with("#include \"numerics/sums.hpp\"")),
              ElementsAre(HasSubstr("against the arrow")));
  EXPECT_THAT(faults_in("formats/cells.cpp", file_with("#include \"spectra/axis.hpp\"")), IsEmpty());
}

TEST(House, ADownwardArrowIsFine) {
  EXPECT_THAT(
      faults_in("cli/main.cpp", file_with("#include \"formats/files.hpp\"\n#include \"cli/commands.hpp\"")),
      IsEmpty());
}

TEST(House, AnUnknownRoomIsFound) {
  EXPECT_THAT(faults_in("utils/strings.hpp", file_with("")),
              ElementsAre(HasSubstr("in no room of the house")));
  EXPECT_THAT(faults_in("base/error.cpp", file_with("#include \"utils/strings.hpp\"")),
              ElementsAre(HasSubstr("in no room")));
  EXPECT_THAT(faults_in("base/error.cpp", file_with("#include \"error.hpp\"")),
              ElementsAre(HasSubstr("in no room")));
}

TEST(House, HeavyHeadersOutsideTheirPlaceAreFound) {
  for (const auto& [path, header] : std::vector<std::pair<std::string, std::string>>{
           {"records/plan.cpp", "toml++/toml.h"},
           {"regression/pls.cpp", "armadillo"},
           {"numerics/products.hpp", "armadillo"},
           {"regression/pls.cpp", "cblas.h"},
           {"model/outlier_limits.cpp", "boost/math/distributions/normal.hpp"},
           {"model/model.cpp", "CLI/CLI.hpp"},
           {"records/model_file.hpp", "nlohmann/json.hpp"},
           {"model/model.cpp", "nlohmann/json.hpp"},
           {"model/model.cpp", "iostream"},
           {"prediction/predict.cpp", "fstream"},
           {"model/model.cpp", "openssl/evp.h"}})
    EXPECT_THAT(faults_in(path, file_with("#include <" + header + ">")),
                ElementsAre(HasSubstr("outside its place")))
        << path << " " << header;
  EXPECT_THAT(faults_in("records/model_file.hpp", file_with("#include <nlohmann/json_fwd.hpp>")), IsEmpty());
  EXPECT_THAT(faults_in("numerics/products.cpp", file_with("#include <armadillo>\n#include <vector>")),
              IsEmpty());
}

TEST(House, AMissingLicenceLineOrIncludeGuardIsFound) {
  EXPECT_THAT(faults_in("base/error.cpp", "#include <vector>\n"), ElementsAre(HasSubstr("SPDX")));
  EXPECT_THAT(faults_in("base/error.hpp", "// SPDX-License-Identifier: Apache-2.0\n"),
              ElementsAre(HasSubstr("#pragma once")));
}

}  // namespace
