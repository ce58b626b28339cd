export { seedDemo, type DemoCheck, type DemoOptions } from './demo';
export { DEMO_SIGN_INS } from './demo-people';
