#pragma once
#include "station/base/entropy.h"

namespace probewright {

/// Uniform in [0, 1): the top 53 bits of one draw.
double uniform_deviate(Entropy& entropy);

/// Standard normal (mean 0, variance 1) by Box and Muller (1958), the cosine branch: always two draws, so that a
/// sequence of deviates is the same whoever else asks in between. std::normal_distribution differs from library to
/// library.
double normal_deviate(Entropy& entropy);

}  // namespace probewright
