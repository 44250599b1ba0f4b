// SPDX-License-Identifier: Apache-2.0
// Whatever the text, reading it as a model ends in a model or in an Error(Input) of one printable line that
// names the file. The digests stop nearly every input, so the reader behind them is called as well; what it
// accepts must be written and read again.
#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <string>
#include <string_view>

#include "base/error.hpp"
#include "records/model_file.hpp"

using namespace bandwright;

namespace {

void check(const Error& error) {
  const std::string_view line = error.what();
  if (error.kind() != ErrorKind::Input || !line.starts_with("m.json:")) std::abort();
  if (line.find('\n') != std::string_view::npos || !is_utf8(line)) std::abort();
}

}  // namespace

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  const std::string_view text(reinterpret_cast<const char*>(data), size);
  try {
    static_cast<void>(parse_model(text, "m.json"));
  } catch (const Error& error) {
    check(error);
  }
  Model model;
  try {
    model = parse_model_unsealed(text, "m.json");
  } catch (const Error& error) {
    check(error);
    return 0;
  }
  model.provenance.id = model_id(model.provenance);
  const std::string sealed = format_model(model);
  if (format_model(parse_model(sealed, "m.json")) != sealed) std::abort();
  return 0;
}
