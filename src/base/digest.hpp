// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <string_view>

namespace bandwright {

/// SHA-256 of the bytes as 64 lower-case hexadecimal digits (FIPS 180-4).
/// Throws Error(Internal) if the library that computes it fails.
[[nodiscard]] std::string sha256(std::string_view bytes);

}  // namespace bandwright
