import written from '../../../content/school/bench-profiles.json'

/** How each flow bench of the school writes its sheets. */
export const benchProfiles = written.profiles
