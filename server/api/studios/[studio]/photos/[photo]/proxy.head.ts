export { default } from './proxy.get'
