// Door: shows SharedScreen, no more.
export { SharedScreen as default } from '@/components/features/caregiver/SharedScreen';
