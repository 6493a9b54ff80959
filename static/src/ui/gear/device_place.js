/** Where this device is, asked for once and only when its button is pressed. */

/** @typedef {{values: Record<string, string>, said: string}} Found */

/** @returns {Promise<GeolocationPosition>} */
function position() {
  return new Promise((resolve, reject) => {
    navigator.geolocation.getCurrentPosition(resolve, reject, { enableHighAccuracy: true, timeout: 15000 });
  });
}

/** @param {GeolocationCoordinates} coords @returns {Found} */
function found(coords) {
  /** @type {Record<string, string>} */
  const values = {
    latitude_deg: coords.latitude.toFixed(5),
    longitude_deg: coords.longitude.toFixed(5),
  };
  if (coords.altitude !== null) values.height_m = coords.altitude.toFixed(0);
  const height = coords.altitude === null ? " The device does not know its height: type it." : "";
  return { values, said: `Found to within ${Math.round(coords.accuracy)} m.${height}` };
}

/** @returns {Promise<Found>} */
export async function devicePlace() {
  if (!("geolocation" in navigator)) {
    return { values: {}, said: "This browser does not tell its place here: type latitude and longitude." };
  }
  try {
    return found((await position()).coords);
  } catch {
    return { values: {}, said: "The device did not tell its place: allow it, or type latitude and longitude." };
  }
}
