// Door: shows QualificationScreen, no more.
export { QualificationScreen as default } from '@/components/features/qualification/QualificationScreen';
