// Where an engineer finds each figure of a measurement setup: for the RFQ's assumed setup and for what a quote or a sweep states.
import type { Setup } from "~/rf/contract";

/**
 * Says for each field of a setup what the figure is and where to find it, in two or three sentences.
 *
 * Sources: ripple technique with an air line, EURAMET cg-12 version 2.0 (2011), kept in version 3.0 (2018); propagation of independent
 * errors, JCGM 100:2008, 5.1.2. What a sentence calls common practice has no source.
 */
export const SETUP_HELP: Readonly<Record<keyof Setup, string>> = {
  transmission:
    "Expanded uncertainty, k = 2, of |S21| well above the noise. From the laboratory's uncertainty calculation, or from the analyser's data sheet for this calibration kit at the loss of the passband; cable movement and repeatability of the connectors included.",
  transmissionRelative:
    "Expanded uncertainty, k = 2, of the difference between two points of one sweep: what both points share, as a wrong tracking, is left out. From the uncertainty calculation: linearity of the receiver, its drift during the sweep, noise of the trace. Blank: taken from the two points' own uncertainties.",
  directivity:
    "Residual directivity after calibration, positive dB. From the analyser's data sheet under corrected performance with the calibration kit in use, or half the peak-to-peak ripple of the linear |S11| with an air line and a good termination (ripple technique, EURAMET cg-12).",
  sourceMatch:
    "Residual source match of the test port after calibration, positive dB. From the analyser's data sheet under corrected performance with the calibration kit in use, or from the ripple of |S11| with an air line and a short (EURAMET cg-12).",
  loadMatch:
    "Residual match of the port behind the part after calibration, positive dB. From the analyser's data sheet under corrected performance; without a two-port calibration it is the raw match of that port. Common practice where nothing is known: the directivity of the calibration.",
  tracking:
    "Residual reflection tracking after calibration, ± dB. From the analyser's data sheet under corrected performance with the calibration kit in use, or from the mean |S11| of a short and an open, which should be 0 dB less the loss of the standard (common practice).",
  noiseFloor:
    "Highest indication of |S21| with a termination on both ports, dB below a through, isolation between the ports included. Measure it with the settings of the data: same calibration, IF bandwidth, power and averaging, over the whole sweep.",
  noiseFloorKind:
    "Peak: the highest indication over the sweep. Rms: the figure of most data sheets, which the highest of N samples lies above by about 10 log ln N dB; an rms figure is lowered by that.",
  groupDelay:
    "Expanded uncertainty, k = 2, of the group delay at the aperture in use. From the uncertainty calculation; from the phase it is 1.41 × its uncertainty in degrees / (360 × the aperture in Hz), where both ends err independently (JCGM 100, 5.1.2).",
  phase:
    "Expanded uncertainty, k = 2, of the distance of the phase of S21 from a straight line, degrees. From the uncertainty calculation or the analyser's data sheet for this calibration kit; common practice from the transmission's figure: 6.6° for each dB.",
};
