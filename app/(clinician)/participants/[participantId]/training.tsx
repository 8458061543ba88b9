// Door: shows TrainingScreen, no more.
export { TrainingScreen as default } from '@/components/features/training/TrainingScreen';
