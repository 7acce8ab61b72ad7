/**
 * Version of the calculations (semver), stored with every fit and result. Same major: same double, bit for bit.
 *
 * 1.0.1: chi-square quantiles in the far tail and above 100 degrees of freedom, t and F probabilities next to 1 and
 * beyond t = 1e150. No number that a fit or a result stores is touched.
 */
export const ENGINE_VERSION = '1.0.1'
