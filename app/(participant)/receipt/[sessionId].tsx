// Door: shows ReceiptScreen, no more.
export { ReceiptScreen as default } from '@/components/features/session/ReceiptScreen';
