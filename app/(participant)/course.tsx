// Door: shows CourseScreen, no more.
export { CourseScreen as default } from '@/components/features/course/CourseScreen';
