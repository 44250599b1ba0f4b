// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <string_view>

#include "model/model.hpp"

/// Models as text. The format is described, member by member, in models/README.md.

namespace bandwright {

/// Newest version of the model file that this program reads, and the one it writes.
inline constexpr int kModelFormat = 1;

/// What the member `kind` of every model file says.
inline constexpr std::string_view kModelKind = "bandwright model";

/// SHA-256 over format version, plan text, and role, name and digest of each input, each part preceded
/// by its length in bytes and a colon.
[[nodiscard]] std::string model_id(const Provenance& provenance, int format = kModelFormat);

/// The model as the text of a file. Same model, same bytes: no clock, no host, no folder of this machine
/// (files named in warnings lose their folders). Doubles in full; what is not finite becomes null.
/// Throws Error(Internal) if provenance.id is not the model_id() of the provenance, Error(Input) if a
/// text is not UTF-8.
[[nodiscard]] std::string format_model(const Model& model);

/// The model that format_model() wrote, bit for bit; `file` names it in messages. The recipe is read from
/// the plan inside, and what the file says of windows, steps and coefficients must follow from it.
/// Throws Error(Input) with the file and the section or member at fault: a changed byte, a text cut short,
/// a newer format, a member that is unknown, missing, of the wrong type or shape, or contradicts another.
[[nodiscard]] Model parse_model(std::string_view text, std::string_view file);

/// The same without the checks of digests and id, for inspecting a damaged file and for the fuzz target.
/// Never predict with what it returns.
[[nodiscard]] Model parse_model_unsealed(std::string_view text, std::string_view file);

/// The digest of its content that a model file states in its last member. Throws Error(Input) if the text
/// has none.
[[nodiscard]] std::string model_content_digest(std::string_view text);

}  // namespace bandwright
