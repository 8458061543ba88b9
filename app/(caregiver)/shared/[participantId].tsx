// Door: shows SharedPersonScreen, no more.
export { SharedPersonScreen as default } from '@/components/features/caregiver/SharedPersonScreen';
