/// A result that could not be written or read: names the file and the cause.
#pragma once
#include <stdexcept>

namespace falcate::post {

class OutputError : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

}  // namespace falcate::post
