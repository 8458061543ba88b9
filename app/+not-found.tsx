// Any address that is no door.
export { NotFoundPage as default } from '@/components/layout/NotFoundPage';
