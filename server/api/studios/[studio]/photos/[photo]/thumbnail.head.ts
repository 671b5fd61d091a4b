export { default } from './thumbnail.get'
