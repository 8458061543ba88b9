// Door: shows WorklistScreen, no more.
export { WorklistScreen as default } from '@/components/features/worklist/WorklistScreen';
