export * from './people'
export * from './shelf'
export * from './benches'
export * from './photos'
