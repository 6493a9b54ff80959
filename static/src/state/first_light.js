/** Frames that were taken before any light could have arrived under the source model. */

/**
 * @param {{mid_time: string}} frame
 * @param {{first_light_at?: string | null}} [source]
 */
export function isBeforeLight(frame, source) {
  return Boolean(source?.first_light_at) && Date.parse(frame.mid_time) < Date.parse(String(source?.first_light_at));
}
