#pragma once
// The ways in which a caller, or what a caller names, can be wrong. Messages are one sentence: what, where, what to do.
#include "numerics/strict.hpp"

#include <stdexcept>
#include <string>

namespace folkmote {

/// A table breaks a rule of the study data.
class BadData : public std::runtime_error {
 public:
  explicit BadData(const std::string& sentence) : std::runtime_error(sentence) {}
};

/// An argument is out of range or of the wrong length.
class BadArgument : public std::runtime_error {
 public:
  explicit BadArgument(const std::string& sentence) : std::runtime_error(sentence) {}
};

/// A file cannot be read or written, or is not what it should be.
class BadFile : public std::runtime_error {
 public:
  explicit BadFile(const std::string& sentence) : std::runtime_error(sentence) {}
};

/// The caller's progress callback asked to stop.
class Cancelled : public std::runtime_error {
 public:
  Cancelled() : std::runtime_error("the run was cancelled by the caller; nothing was made.") {}
};

}  // namespace folkmote
