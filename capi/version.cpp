#include "capi_count.hpp"
#include "folkmote.h"
#include "random/streams.hpp"

namespace folkmote {

static_assert(stream_version == FOLKMOTE_STREAM_VERSION);

std::atomic<std::int64_t>& live_handles() noexcept {
  static std::atomic<std::int64_t> count{0};
  return count;
}

}  // namespace folkmote

const char* folkmote_version(void) { return FOLKMOTE_VERSION; }
int folkmote_stream_version(void) { return FOLKMOTE_STREAM_VERSION; }
size_t folkmote_message_bytes(void) { return FOLKMOTE_MESSAGE_BYTES; }
int64_t folkmote_live_handles(void) { return folkmote::live_handles().load(); }

const char* folkmote_status_name(int status) {
  switch (status) {
    case FOLKMOTE_OK:
      return "FOLKMOTE_OK";
    case FOLKMOTE_BAD_ARGUMENT:
      return "FOLKMOTE_BAD_ARGUMENT";
    case FOLKMOTE_BAD_DATA:
      return "FOLKMOTE_BAD_DATA";
    case FOLKMOTE_OUT_OF_MEMORY:
      return "FOLKMOTE_OUT_OF_MEMORY";
    case FOLKMOTE_CANCELLED:
      return "FOLKMOTE_CANCELLED";
    case FOLKMOTE_BAD_FILE:
      return "FOLKMOTE_BAD_FILE";
    case FOLKMOTE_INTERNAL:
      return "FOLKMOTE_INTERNAL";
    default:
      return "unknown status";
  }
}

const char* folkmote_status_text(int status) {
  switch (status) {
    case FOLKMOTE_OK:
      return "done";
    case FOLKMOTE_BAD_ARGUMENT:
      return "an argument is missing, out of range, or of the wrong length";
    case FOLKMOTE_BAD_DATA:
      return "a table breaks a rule of the study data";
    case FOLKMOTE_OUT_OF_MEMORY:
      return "there is not enough memory";
    case FOLKMOTE_CANCELLED:
      return "the run was cancelled by the caller";
    case FOLKMOTE_BAD_FILE:
      return "a file cannot be read or written, or is not what it should be";
    case FOLKMOTE_INTERNAL:
      return "a defect of the library";
    default:
      return "unknown status";
  }
}
