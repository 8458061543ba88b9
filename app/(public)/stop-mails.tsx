// Door: shows StopMailsScreen, no more.
export { StopMailsScreen as default } from '@/components/features/account/StopMailsScreen';
