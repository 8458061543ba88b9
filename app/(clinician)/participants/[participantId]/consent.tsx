// Door: shows ConsentScreen, no more.
export { ConsentScreen as default } from '@/components/features/consent/ConsentScreen';
