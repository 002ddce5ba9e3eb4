#pragma once
#include "tests/faults/shift/shift.h"

// Mistakes that a station could have, planted from outside: stand-ins that make it look as if it had them. A shift must
// find each.
namespace probewright::faults {

/// Answers lose the mark of whose they are: adapters' replies get the number of the newest request, and phantoms'
/// echoes come at once, before what they should fence off. So a late reply is taken for the next.
sequence::PortOpener taking_late_replies_for_the_next(sequence::PortOpener ports);

/// "LEDs off" never reaches the adapter after a run that did not go through, though it seems so.
sequence::PortOpener leaving_leds_on_after_a_void(sequence::PortOpener ports);

}  // namespace probewright::faults
