/// Two loops that show what the machine can do: arithmetic in registers alone, and the triad
/// a = b + s c over arrays far larger than its caches.
/// Source: McCalpin, Memory bandwidth and machine balance in current high performance computers,
/// IEEE TCCA Newsletter (1995) 19-25 (triad; 24 bytes counted a number).
#pragma once
#include <cstddef>

namespace falcate::benchmarks {

/// Wall time of a fixed amount of fused multiply-adds on each of so many threads, seconds.
double arithmetic_seconds(int threads, long rounds);

/// Bytes a second of the triad, one thread, the best of repeats; arrays of `length` numbers.
double triad_bandwidth(std::size_t length);

}  // namespace falcate::benchmarks
