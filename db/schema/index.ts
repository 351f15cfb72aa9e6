export * from './access';
export * from './control';
export * from './design';
export * from './grade';
export * from './projects';
export * from './record';
export * from './setups';
export * from './uploads';
