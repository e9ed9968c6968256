export { analysePath as analyse } from './analyse.ts'
export { drawTask as draw } from './draw.ts'
