// Door: shows InvitationScreen, no more.
export { InvitationScreen as default } from '@/components/features/account/InvitationScreen';
