#pragma once
#include <span>
#include <string_view>
#include <vector>

#include "station/measure/captures.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/measure/reading.h"

namespace probewright::measure {

/// The checks that evaluate() can compute, in catalogue order. A model that asks for another is refused when read.
std::span<const std::string_view> evaluated_checks();
/// Whether a reading of this check carries an uncertainty (yes/no does not).
bool carries_uncertainty(std::string_view check);

/// All readings of one run: one for each check of the model's routine, in catalogue order. Pure: the same arguments
/// give the same bits. The routine, re-derivation and simulation all come through here. Any thread.
/// After the first hard fault (no probe, an LED that cannot shine, a dead detector) what cannot mean anything any more,
/// or was not captured, has no value and the reason "blocked_by:<check>"; so has what needs the bin that an open ID
/// does not tell. What cannot be computed becomes a reading without a value and with its reason; nothing throws for
/// what a device sent. Uncertainty: noise from the captures, temperature and its coefficient, and the model's budget
/// for the check, in quadrature; expanded with k = 2 (JCGM 100).
std::vector<Reading> evaluate(const Model& model, const Certificates& certificates, const Captures& captures);

}  // namespace probewright::measure
