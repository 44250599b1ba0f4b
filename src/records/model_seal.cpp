// SPDX-License-Identifier: Apache-2.0
#include "records/model_seal.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <nlohmann/json.hpp>
#include <optional>

#include "base/digest.hpp"
#include "base/error.hpp"
#include "records/json.hpp"

namespace bandwright {
namespace {

constexpr std::string_view kHead = "{\n\"format\": ";
constexpr std::string_view kConvertedHead = "{\r\n\"format\": ";
constexpr std::string_view kComponentsHead = "\"components\": [";
constexpr std::string_view kComponentStart = "{\"name\":";
constexpr std::string_view kDigestsStart = "\"digests\": ";
constexpr std::string_view kSealStart = "\"content_sha256\": \"";
constexpr std::string_view kSealEnd = "\"\n}\n";
constexpr std::size_t kDigestLength = 64;

struct Section {
  std::string name;
  std::string digest;  ///< of its text

  Section(std::string its_name, std::string_view text) : name(std::move(its_name)), digest(sha256(text)) {}
};

[[noreturn]] void refuse(std::string message, std::string hint = {}) {
  throw Error(ErrorKind::Input, std::move(message),
              {.file = {}, .line = 0, .field = {}, .hint = std::move(hint)});
}

std::string component_name(std::size_t position) { return fmt::format("components[{}]", position); }

std::string digests_value(const std::vector<Section>& sections) {
  std::string value = "{";
  for (const Section& section : sections)
    value += fmt::format("{}\"{}\":\"{}\"", value.size() > 1 ? "," : "", section.name, section.digest);
  return value + "}";
}

/// A text cut at its seal.
struct SealedText {
  std::string_view content;  ///< every byte before the last member
  std::string_view digest;   ///< what the last member says
};

std::optional<SealedText> cut_at_seal(std::string_view text) {
  constexpr std::size_t kLength = kSealStart.size() + kDigestLength + kSealEnd.size();
  if (text.size() < kLength || !text.ends_with(kSealEnd)) return std::nullopt;
  const std::size_t at = text.size() - kLength;
  if (text.substr(at, kSealStart.size()) != kSealStart) return std::nullopt;
  return SealedText{.content = text.substr(0, at),
                    .digest = text.substr(at + kSealStart.size(), kDigestLength)};
}

/// Lines as they are laid out, each without its comma.
std::vector<std::string_view> lines_of(std::string_view text) {
  std::vector<std::string_view> lines;
  while (!text.empty()) {
    const std::size_t end = text.find('\n');
    std::string_view line = text.substr(0, end);
    text.remove_prefix(end == std::string_view::npos ? text.size() : end + 1);
    if (line.ends_with(',')) line.remove_suffix(1);
    lines.push_back(line);
  }
  return lines;
}

/// The sections that the lines hold, whatever has become of them.
std::vector<Section> sections_in(const std::vector<std::string_view>& lines) {
  std::vector<Section> found;
  std::size_t components = 0;
  for (const std::string_view line : lines) {
    if (line.starts_with(kComponentStart)) {
      found.emplace_back(component_name(components++), line);
      continue;
    }
    const std::size_t key_end = line.find("\": ");
    const bool is_member = line.starts_with('"') && key_end != std::string_view::npos;
    if (!is_member || line == kComponentsHead || line.starts_with(kDigestsStart)) continue;
    found.emplace_back(std::string(line.substr(1, key_end - 1)), line);
  }
  return found;
}

/// The content with its digests made anew from the sections as they stand: what was written, if nothing
/// but the digests was changed.
std::string with_fresh_digests(std::string_view content, std::string_view digests_line,
                               const std::vector<Section>& sections) {
  const auto at = static_cast<std::size_t>(digests_line.data() - content.data());
  return fmt::format("{}{}{}{}", content.substr(0, at), kDigestsStart, digests_value(sections),
                     content.substr(at + digests_line.size()));
}

/// The first section whose digest is not the one written down; empty if there is none, or if the
/// digests themselves are what was changed.
std::optional<std::string> changed_section(const SealedText& sealed) {
  const std::vector<std::string_view> lines = lines_of(sealed.content);
  const auto digests_line = std::find_if(
      lines.begin(), lines.end(), [](std::string_view line) { return line.starts_with(kDigestsStart); });
  if (digests_line == lines.end()) return std::nullopt;
  const std::vector<Section> sections = sections_in(lines);
  if (sha256(with_fresh_digests(sealed.content, *digests_line, sections)) == sealed.digest)
    return std::nullopt;
  try {
    const Json stated = parse_json(digests_line->substr(kDigestsStart.size()), {});
    for (const auto& [name, digest] : stated.items()) {
      const auto found =
          std::find_if(sections.begin(), sections.end(),
                       [&name = name](const Section& section) { return section.name == name; });
      if (found == sections.end() || !digest.is_string() ||
          digest.get_ref<const std::string&>() != found->digest)
        return name;
    }
  } catch (const Error&) {
    return std::nullopt;  // the digests cannot be read: nothing tells the sections apart
  }
  return std::nullopt;
}

}  // namespace

std::string sealed_text(const ModelSections& sections) {
  std::string text = "{\n";
  std::vector<Section> guarded;
  for (const auto& [key, value] : sections.members) {
    const std::string line = fmt::format("\"{}\": {}", key, value);
    guarded.emplace_back(key, line);
    text += line + ",\n";
  }
  text += fmt::format("{}\n", kComponentsHead);
  for (std::size_t i = 0; i < sections.components.size(); ++i) {
    guarded.emplace_back(component_name(i), sections.components[i]);
    text += sections.components[i] + (i + 1 < sections.components.size() ? ",\n" : "\n");
  }
  text += fmt::format("],\n{}{},\n", kDigestsStart, digests_value(guarded));
  return fmt::format("{}{}{}{}", text, kSealStart, sha256(text), kSealEnd);
}

std::string stated_content_digest(std::string_view text) {
  if (text.empty()) refuse("the file is empty");
  const auto sealed = cut_at_seal(text);
  if (sealed) return std::string(sealed->digest);
  if (text.starts_with(kConvertedHead))
    refuse("not as it was written: it holds carriage returns",
           "a transfer changed the line ends; copy the file byte for byte");
  if (!text.starts_with(kHead)) refuse("not a model file");
  refuse("cut short or changed at its end: a model file ends with its content_sha256");
}

void check_seal(std::string_view text) {
  const std::string stated = stated_content_digest(text);
  const SealedText sealed = cut_at_seal(text).value();
  if (sha256(sealed.content) == stated) return;
  if (const auto section = changed_section(sealed))
    refuse(fmt::format("the section \"{}\" was changed after the model was written (its SHA-256 differs)",
                       *section));
  refuse("the layout or the digests were changed after the model was written (its content_sha256 differs)");
}

}  // namespace bandwright
