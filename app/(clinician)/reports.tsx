// Door: shows ReportsScreen, no more.
export { ReportsScreen as default } from '@/components/features/report/ReportsScreen';
