#pragma once
#include <vector>

#include "station/pages/paper.h"
#include "station/trace/run_story.h"

/// Plots of what a run's captures show. Private to pages. Main thread only.
namespace probewright::pages {

/// Both LEDs' spectra over their peaks on one wavelength axis, with their centroids. At least one spectrum.
Block spectra_plot(const std::vector<trace::SpectrumPlot>& spectra);

/// The pulse trains of red and infrared, up to three set points side by side, more below. At least one.
std::vector<Block> pulse_plots(const std::vector<trace::PulsePlot>& pulses);

}  // namespace probewright::pages
