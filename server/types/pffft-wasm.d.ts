declare module '@echogarden/pffft-wasm/simd' {
  /** The functions of pffft.h that the WebAssembly build exports; pointers are byte offsets into its heap. */
  export interface PffftModule {
    /** Replaced when the heap grows: read it anew after every allocation. */
    readonly HEAPF32: Float32Array;
    _pffft_new_setup(size: number, kind: number): number;
    _pffft_destroy_setup(setup: number): void;
    _pffft_aligned_malloc(bytes: number): number;
    _pffft_aligned_free(pointer: number): void;
    /** Direction 0 is forward; real input gives [X0, X(N/2), Re X1, Im X1, ...]. */
    _pffft_transform_ordered(
      setup: number,
      input: number,
      output: number,
      work: number,
      direction: number,
    ): void;
  }
  const createModule: () => Promise<PffftModule>;
  export default createModule;
}
