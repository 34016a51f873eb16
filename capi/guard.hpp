#pragma once
// The one place where C++ exceptions become a status and a sentence. Every exported function that can fail is this
// guard round one call.
#include "numerics/strict.hpp"

#include <cstdint>
#include <cstring>
#include <new>
#include <stdexcept>
#include <string>
#include <string_view>

#include "community/fault.hpp"
#include "folkmote.h"

namespace folkmote {

inline void write_message(char* message, std::string_view sentence) noexcept {
  if (message == nullptr) return;
  std::size_t length = sentence.size() < FOLKMOTE_MESSAGE_BYTES ? sentence.size() : FOLKMOTE_MESSAGE_BYTES - 1;
  // Not in the middle of a UTF-8 character.
  while (length < sentence.size() && length > 0 && (static_cast<unsigned char>(sentence[length]) & 0xC0U) == 0x80U)
    --length;
  std::memcpy(message, sentence.data(), length);
  message[length] = '\0';
}

template <class Call>
folkmote_status guard(char* message, const Call& call) noexcept {
  try {
    call();
    write_message(message, "");
    return FOLKMOTE_OK;
  } catch (const BadData& fault) {
    write_message(message, fault.what());
    return FOLKMOTE_BAD_DATA;
  } catch (const BadArgument& fault) {
    write_message(message, fault.what());
    return FOLKMOTE_BAD_ARGUMENT;
  } catch (const BadFile& fault) {
    write_message(message, fault.what());
    return FOLKMOTE_BAD_FILE;
  } catch (const Cancelled& fault) {
    write_message(message, fault.what());
    return FOLKMOTE_CANCELLED;
  } catch (const std::bad_alloc&) {
    write_message(message, "there is not enough memory for this call; nothing was made.");
    return FOLKMOTE_OUT_OF_MEMORY;
  } catch (const std::length_error&) {
    write_message(message, "the call asks for more memory than can be addressed; nothing was made.");
    return FOLKMOTE_OUT_OF_MEMORY;
  } catch (const std::exception& fault) {
    write_message(message, std::string_view(fault.what()));
    return FOLKMOTE_INTERNAL;
  } catch (...) {
    write_message(message, "an unknown defect of the library; please report it.");
    return FOLKMOTE_INTERNAL;
  }
}

/// The digest that `call` gives; 0 when there is not enough memory for it, since a digest has no status to return.
template <class Call>
std::uint64_t guard_digest(const Call& call) noexcept {
  std::uint64_t digest = 0;
  guard(nullptr, [&] { digest = call(); });
  return digest;
}

/// Refuses NULL where the header asks for an object, an array or a place for the result.
template <class Pointer>
Pointer needed(Pointer pointer, const char* name) {
  if (pointer == nullptr) throw BadArgument(std::string(name) + " is NULL; give a valid pointer.");
  return pointer;
}

}  // namespace folkmote
