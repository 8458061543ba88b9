// Door: shows ReviewScreen, no more.
export { ReviewScreen as default } from '@/components/features/review/ReviewScreen';
