// Door: shows ParticipantScreen, no more.
export { ParticipantScreen as default } from '@/components/features/participant/ParticipantScreen';
