// Door: shows PrescriptionScreen, no more.
export { PrescriptionScreen as default } from '@/components/features/prescription/PrescriptionScreen';
