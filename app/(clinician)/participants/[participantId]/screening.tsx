// Door: shows ScreeningScreen, no more.
export { ScreeningScreen as default } from '@/components/features/screening/ScreeningScreen';
