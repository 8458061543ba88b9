// Door: shows RunScreen, no more.
export { RunScreen as default } from '@/components/features/session/RunScreen';
