// Door: shows MyScreen, no more.
export { MyScreen as default } from '@/components/features/account/MyScreen';
