/** Version of the calculations (semver), stored with every fit and result. Same major: same double, bit for bit. */
export const ENGINE_VERSION = '1.0.0'
