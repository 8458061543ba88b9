// Door: shows PrecheckScreen, no more.
export { PrecheckScreen as default } from '@/components/features/precheck/PrecheckScreen';
