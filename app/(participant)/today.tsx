// Door: shows TodayScreen, no more.
export { TodayScreen as default } from '@/components/features/clearance/TodayScreen';
