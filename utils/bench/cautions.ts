/** Said wherever gains are adopted. */
export const cautions: readonly string[] = [
  'A wrong gain can throw a machine about. The readings are predictions of a model.',
  'Begin at reduced torque, speed and travel, with people outside the reach of the machine and the emergency stop at hand.',
  'The safety functions of the machine (for example to IEC 60204-1, ISO 12100, ISO 13849) and local codes take precedence.',
  'The person who enables the drive must be qualified for it.',
]
