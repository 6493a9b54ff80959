/** What POST campaigns is sent. Pure. */

/**
 * @param {{read: import("./launch_page.js").RegionRead, given: import("./launch_page.js").Given,
 *          typed: Record<string, any>, numbers: {magnitude: number, sigma_mag: number}}} choices
 */
export function campaignBody({ read, given, typed, numbers }) {
  const alert = "json" in given ? { alert: given.json } : { upload: read.upload };
  return {
    ...alert,
    title: typed.title,
    source: { preset: "steady", parameters: numbers },
    is_public: typed.is_public === true,
    is_rehearsal: read.alert.role === "test" || typed.is_rehearsal === true,
  };
}
