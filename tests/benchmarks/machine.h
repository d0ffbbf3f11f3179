/// What the figures were measured on: processor, cores, compiler, flags, load. Neither names of
/// hosts nor folders nor the date.
#pragma once
#include <string>

namespace falcate::benchmarks {

std::string machine_words();

}  // namespace falcate::benchmarks
