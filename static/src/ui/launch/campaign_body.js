/** What POST campaigns is sent. Pure. */

/** Whether a message can only become a rehearsal: it is a test or foretells something. @param {any} alert */
export function isExercise(alert) {
  return ["test", "prediction"].includes(alert.role);
}

/**
 * @param {{read: import("./launch_page.js").RegionRead, given: import("./launch_page.js").Given,
 *          typed: Record<string, any>, source: any, prior?: string}} choices
 */
export function campaignBody({ read, given, typed, source, prior }) {
  const alert = "json" in given ? { alert: given.json } : { upload: read.upload, filename: given.file.name.slice(0, 100) };
  return {
    ...alert,
    title: typed.title,
    source,
    ...(prior ? { prior } : {}),
    is_public: typed.is_public === true,
    is_rehearsal: isExercise(read.alert) || typed.is_rehearsal === true,
  };
}
