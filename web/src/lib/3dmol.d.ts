declare module '3dmol/build/3Dmol.es6-min.js' {
  export * from '3dmol'
}
