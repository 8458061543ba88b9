// Door: shows AcknowledgeScreen, no more.
export { AcknowledgeScreen as default } from '@/components/features/prescription/AcknowledgeScreen';
