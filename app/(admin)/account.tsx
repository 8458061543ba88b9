// Door: shows StaffAccountScreen, no more.
export { StaffAccountScreen as default } from '@/components/features/account/StaffAccountScreen';
