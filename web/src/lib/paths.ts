export { paths } from '@weirlight/shared/paths'
