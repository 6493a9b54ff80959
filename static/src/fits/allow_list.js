/**
 * The only header keywords that leave the device: where the frame points, when, how long, in which
 * band. Observers' names, places, paths and free text never do.
 */

const DIGITS = [...Array(10).keys()];

/** SIP's polynomials, A_p_q and B_p_q. */
const SIP = ["A", "B"].flatMap((axis) => [`${axis}_ORDER`, ...DIGITS.flatMap((p) => DIGITS.map((q) => `${axis}_${p}_${q}`))]);

/** Parameters of a projection, PVi_0 to PVi_99: with them a distortion is known to be there. */
const PROJECTION = [1, 2].flatMap((axis) => [...Array(100).keys()].map((m) => `PV${axis}_${m}`));

export const NAMES = new Set([
  // The picture's size and the plane it stands on.
  ...["NAXIS", "NAXIS1", "NAXIS2", "IMAGEW", "IMAGEH", "WCSAXES", "CTYPE1", "CTYPE2", "CUNIT1", "CUNIT2"],
  ...["CRVAL1", "CRVAL2", "CRPIX1", "CRPIX2", "CDELT1", "CDELT2", "CROTA1", "CROTA2"],
  ...["CD1_1", "CD1_2", "CD2_1", "CD2_2", "PC1_1", "PC1_2", "PC2_1", "PC2_2"],
  ...["PC001001", "PC001002", "PC002001", "PC002002", ...SIP, ...PROJECTION],
  ...["LONPOLE", "LATPOLE", "EQUINOX", "EPOCH", "RADESYS", "RADECSYS"],
  // Where no plane was solved: the mount's word and the optics.
  ...["RA", "DEC", "OBJCTRA", "OBJCTDEC", "FOCALLEN", "XPIXSZ", "YPIXSZ", "XBINNING", "YBINNING"],
  ...["PIXSCALE", "SCALE"],
  // When and how long.
  ...["DATE-OBS", "TIME-OBS", "DATE-BEG", "DATE-END", "DATE-AVG", "MJD-OBS", "MJD-AVG"],
  ...["MJD-END", "JD", "UT", "UTC", "TIMESYS", "EXPTIME", "EXPOSURE", "EXP_TIME"],
  ...["XPOSURE", "TELAPSE", "NCOMBINE", "STACKCNT"],
  // Through what, how deep.
  ...["FILTER", "FILTER1", "BAND", "SATURATE", "MAGLIM", "MAGZERO"],
]);

const MAX_TEXT = 40;

/** @param {string} keyword */
export function isAllowed(keyword) {
  return NAMES.has(keyword);
}

/**
 * The allowed keywords of a list of cards; the first of a repeated keyword counts. A text that is
 * longer than any honest value of these keywords is left out, as is a path or an address.
 * @param {{keyword: string, value: string|number|boolean|null}[]} cards
 * @returns {Record<string, string|number>}
 */
export function allowedKeywords(cards) {
  /** @type {Record<string, string|number>} */
  const header = {};
  for (const { keyword, value } of cards) {
    if (keyword in header || !isAllowed(keyword)) continue;
    if (typeof value === "number" && Number.isFinite(value)) header[keyword] = value;
    if (typeof value === "string" && isHarmless(value)) header[keyword] = value;
  }
  return header;
}

/** @param {string} text */
function isHarmless(text) {
  return text.length > 0 && text.length <= MAX_TEXT && !/[\\@]|\/.*\//.test(text);
}
