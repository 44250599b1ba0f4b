// SPDX-License-Identifier: Apache-2.0
#include "records/model_seal.hpp"

#include <gtest/gtest.h>

#include "base/digest.hpp"
#include "support/error_text.hpp"

namespace bandwright {
namespace {

const ModelSections kSections{.members = {{"format", "1"}, {"axis", "[1,2]"}},
                              .components = {R"({"name":"A"})", R"({"name":"B"})"}};

std::string refusal(const std::string& text) {
  return error_text(ErrorKind::Input, [&] { check_seal(text); });
}

/// The sealed text with the first occurrence of `from` replaced.
std::string changed(std::string_view from, std::string_view to) {
  std::string text = sealed_text(kSections);
  return text.replace(text.find(from), from.size(), to);
}

std::string section_changed(const std::string& name) {
  return "the section \"" + name + "\" was changed after the model was written (its SHA-256 differs)";
}

const std::string kRestChanged =
    "the layout or the digests were changed after the model was written (its content_sha256 differs)";

TEST(ModelSeal, LaysOutOneSectionALineAndHashesEachLine) {
  const std::string before = std::string("{\n\"format\": 1,\n\"axis\": [1,2],\n\"components\": [\n") +
                             "{\"name\":\"A\"},\n{\"name\":\"B\"}\n],\n\"digests\": {\"format\":\"" +
                             sha256("\"format\": 1") + "\",\"axis\":\"" + sha256("\"axis\": [1,2]") +
                             "\",\"components[0]\":\"" + sha256("{\"name\":\"A\"}") +
                             "\",\"components[1]\":\"" + sha256("{\"name\":\"B\"}") + "\"},\n";
  EXPECT_EQ(sealed_text(kSections), before + "\"content_sha256\": \"" + sha256(before) + "\"\n}\n");
  EXPECT_NO_THROW(check_seal(sealed_text(kSections)));
}

TEST(ModelSeal, NamesTheSectionThatWasChanged) {
  EXPECT_EQ(refusal(changed("[1,2]", "[1,3]")), section_changed("axis"));
  EXPECT_EQ(refusal(changed("\"axis\"", "\"bxis\"")), section_changed("axis"));
  EXPECT_EQ(refusal(changed("\"format\": 1", "\"format\": 2")), section_changed("format"));
  EXPECT_EQ(refusal(changed("\"A\"", "\"a\"")), section_changed("components[0]"));
  EXPECT_EQ(refusal(changed("{\"name\":\"B\"", "{\"nbme\":\"B\"")), section_changed("components[1]"));
}

TEST(ModelSeal, SaysWhenLayoutOrDigestsWereChanged) {
  EXPECT_EQ(refusal(changed("\"components\": [\n", "\"components\": [\n\n")), kRestChanged);
  EXPECT_EQ(refusal(changed("\"digests\": {\"format\":\"", "\"digests\": {\"format\":\"0")), kRestChanged);
  EXPECT_EQ(refusal(changed("\"components[1]\":", "\"components[2]\":")), kRestChanged);
  std::string other_seal = sealed_text(kSections);
  char& digit = other_seal[other_seal.size() - 5];
  digit = digit == '0' ? '1' : '0';
  EXPECT_EQ(refusal(other_seal), kRestChanged);
}

TEST(ModelSeal, TextsThatAreNoWholeModelFileAreRefused) {
  EXPECT_EQ(refusal(""), "the file is empty");
  EXPECT_EQ(refusal("sample,1800,1796\r\n"), "not a model file");
  EXPECT_EQ(refusal("{}"), "not a model file");
  const std::string cut = "cut short or changed at its end: a model file ends with its content_sha256";
  const std::string whole = sealed_text(kSections);
  EXPECT_EQ(refusal(whole.substr(0, whole.size() - 1)), cut);
  EXPECT_EQ(refusal(whole.substr(0, whole.size() / 2)), cut);
  EXPECT_EQ(refusal(whole + "\n"), cut);
}

TEST(ModelSeal, ConvertedLineEndsAreRecognised) {
  std::string converted;
  for (const char c : sealed_text(kSections))
    converted += c == '\n' ? std::string("\r\n") : std::string(1, c);
  EXPECT_EQ(refusal(converted),
            "not as it was written: it holds carriage returns (a transfer changed the line ends; copy the "
            "file byte "
            "for byte)");
}

TEST(ModelSeal, StatesTheDigestOfItsContent) {
  const std::string text = sealed_text(kSections);
  EXPECT_EQ(stated_content_digest(text), sha256(text.substr(0, text.find("\"content_sha256\""))));
}

}  // namespace
}  // namespace bandwright
