import { defineAlert } from './alert.js';

export const calibrationLapsed = defineAlert({
  id: 'calibration-lapsed',
  title: 'No calibration in force for this setting',
  judge({ response }) {
    const state = response.closedByService
      ? 'closed by a service; nothing measured since'
      : response.basis === 'not-calibrated'
        ? 'never measured with this wavelength, handpiece and spot'
        : response.lapsed
          ? 'past its validity'
          : response.basis === 'outside-range'
            ? 'used outside the measured range of settings'
            : null;
    if (state === null) return null;
    return {
      severity: response.basis === 'outside-range' && !response.lapsed ? 'low' : 'moderate',
      text: `Calibration ${state}; the interval of the delivered fluence is widened.`,
      evidence: {
        basis: response.basis,
        lapsed: response.lapsed,
        closedByService: response.closedByService,
        calibrationIds: response.calibrationIds,
      },
    };
  },
});
