export { multipliesPerSample } from '@/dsp'
