// Door: shows DiaryListScreen, no more.
export { DiaryListScreen as default } from '@/components/features/diary/DiaryListScreen';
