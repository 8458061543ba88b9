// Door: shows ThreadScreen, no more.
export { ThreadScreen as default } from '@/components/features/message/ThreadScreen';
