/** The one copy of the banner's text. */
export const bannerText =
  'Model estimates for licensed professionals, not a prescription. Licensed clinical judgment, the device’s instructions for use and local codes govern; begin with a test patch.';
export const bannerHeader = 'clinical-banner';
export const bannerHeaderValue = 'licensed clinical judgment governs';
