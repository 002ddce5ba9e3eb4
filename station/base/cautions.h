#pragma once

namespace probewright {

/// What whoever relies on this program's answers must know; shown by the overview, by reports and by windows.
inline constexpr const char* cautions =
    "A pass is production evidence: this probe met its limit sheet on this station. It does not show the accuracy of\n"
    "saturation readings in people; that takes controlled desaturation studies, as ISO 80601-2-61 describes.\n"
    "The radiation of LEDs and electrical safety are for qualified people to judge, under the standards and local\n"
    "rules in force.\n"
    "The limits, models and certificates that come with this program are a demonstration. Every one of them must be\n"
    "replaced by your own before a probe is shipped on its verdict.";

}  // namespace probewright
