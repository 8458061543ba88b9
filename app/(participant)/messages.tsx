// Door: shows MessagesScreen, no more.
export { MessagesScreen as default } from '@/components/features/message/MessagesScreen';
