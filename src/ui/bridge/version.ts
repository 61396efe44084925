import { version } from '../../../package.json'

/** Of the program, as it stands in package.json. */
export const VERSION: string = version
