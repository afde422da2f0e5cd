const radians = (degrees: number) => (degrees * Math.PI) / 180;

/** Solar constant, MJ/m²·min. Source: FAO-56 (Allen et al. 1998) eq. 21. */
const solarConstant = 0.082;

/** Solar declination, rad, for a day of the year. Source: FAO-56 eq. 24. */
export const declinationRad = (dayOfYear: number): number =>
  0.409 * Math.sin((2 * Math.PI * dayOfYear) / 365 - 1.39);

/**
 * Sunset hour angle, rad; 0 in polar night, π in polar day.
 * Source: FAO-56 eq. 25.
 */
export function sunsetHourAngleRad(latitudeDeg: number, declination: number): number {
  const cosine = -Math.tan(radians(latitudeDeg)) * Math.tan(declination);
  return Math.acos(Math.min(1, Math.max(-1, cosine)));
}

/** Daylight hours. Source: FAO-56 eq. 34. @example daylightHours(-20, declinationRad(246)) // 11.7 */
export const daylightHours = (latitudeDeg: number, declination: number): number =>
  (24 / Math.PI) * sunsetHourAngleRad(latitudeDeg, declination);

/**
 * Extraterrestrial radiation, MJ/m²·d.
 * @param latitudeDeg degrees, south negative @param dayOfYear 1 to 366
 * @source FAO-56 eq. 21 to 25, Example 8 p. 47
 * @example extraterrestrialRadiation(-20, 246) // 32.2
 */
export function extraterrestrialRadiation(latitudeDeg: number, dayOfYear: number): number {
  const inverseDistance = 1 + 0.033 * Math.cos((2 * Math.PI * dayOfYear) / 365);
  const declination = declinationRad(dayOfYear);
  const sunset = sunsetHourAngleRad(latitudeDeg, declination);
  const latitude = radians(latitudeDeg);
  return (
    ((24 * 60) / Math.PI) *
    solarConstant *
    inverseDistance *
    (sunset * Math.sin(latitude) * Math.sin(declination) +
      Math.cos(latitude) * Math.cos(declination) * Math.sin(sunset))
  );
}

/** Water evaporated by 1 MJ/m², mm. Source: FAO-56 eq. 20. */
export const mmPerMegajoule = 0.408;
