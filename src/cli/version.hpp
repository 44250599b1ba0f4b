// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>

namespace bandwright::cli {

/// "0.1.0"
[[nodiscard]] std::string version_number();
/// "bandwright 0.1.0" and a newline.
[[nodiscard]] std::string version_line();
/// The same as JSON, with the libraries and the linear-algebra kernel in use.
[[nodiscard]] std::string version_document();

}  // namespace bandwright::cli
