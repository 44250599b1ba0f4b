// SPDX-License-Identifier: Apache-2.0
#include "base/digest.hpp"

#include <fmt/format.h>
#include <openssl/evp.h>

#include <array>

#include "base/error.hpp"

namespace bandwright {

std::string sha256(std::string_view bytes) {
  std::array<unsigned char, EVP_MAX_MD_SIZE> digest{};
  unsigned int length = 0;
  if (EVP_Digest(bytes.data(), bytes.size(), digest.data(), &length, EVP_sha256(), nullptr) != 1)
    throw Error(ErrorKind::Internal, "the SHA-256 digest could not be computed");
  std::string text;
  text.reserve(2 * std::size_t{length});
  for (unsigned int i = 0; i < length; ++i) fmt::format_to(std::back_inserter(text), "{:02x}", digest[i]);
  return text;
}

}  // namespace bandwright
