export { default } from './forecast.get'
