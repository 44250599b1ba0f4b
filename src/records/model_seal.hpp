// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <string_view>
#include <utility>
#include <vector>

/// The outer layout of a model file and the digests that guard it. Knows nothing of what a section says.
///
///     {
///     "format": 1,
///     ...
///     "components": [
///     {...},
///     {...}
///     ],
///     "digests": {"format":"<SHA-256>",...,"components[0]":"<SHA-256>",...},
///     "content_sha256": "<SHA-256 of every byte before this line>"
///     }
///
/// A section is one line without the comma at its end: a member with its key, or a component. All
/// members before `digests` but `components` are sections, and each of the components is one.

namespace bandwright {

/// JSON text of each section, on one line each.
struct ModelSections {
  std::vector<std::pair<std::string, std::string>> members;  ///< key and value, in the order of the file
  std::vector<std::string> components;                       ///< objects that begin with `{"name":`
};

/// The whole text of a model file, digests and all.
[[nodiscard]] std::string sealed_text(const ModelSections& sections);

/// The digest in the last member, as it stands there. Throws Error(Input) if the text does not end in one.
[[nodiscard]] std::string stated_content_digest(std::string_view text);

/// Returns when every byte is as sealed_text() wrote it. Otherwise throws an Error(Input) that names the
/// section that was changed, or says that the rest was, or that the text is cut short or no model file.
void check_seal(std::string_view text);

}  // namespace bandwright
