// Door: shows HelpScreen, no more.
export { HelpScreen as default } from '@/components/features/help/HelpScreen';
