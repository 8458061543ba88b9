// Door: shows ParticipantsScreen, no more.
export { ParticipantsScreen as default } from '@/components/features/participant/ParticipantsScreen';
