// Door: shows DevicesScreen, no more.
export { DevicesScreen as default } from '@/components/features/device/DevicesScreen';
