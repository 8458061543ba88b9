// Door: shows DiaryScreen, no more.
export { DiaryScreen as default } from '@/components/features/diary/DiaryScreen';
