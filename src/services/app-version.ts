/** The version of the program, as in package.json; the server may ask a phone that is too old to update. */
export const APP_VERSION = '0.1.0'
