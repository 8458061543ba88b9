// Door: shows EnrolScreen, no more.
export { EnrolScreen as default } from '@/components/features/participant/EnrolScreen';
