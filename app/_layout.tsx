// What stands round every screen.
export { Root as default } from '@/components/layout/Root';
