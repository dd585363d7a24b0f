/** The largest log, uncompressed: 200 MB. */
export const LOG_LIMIT_BYTES = 200_000_000

/** Whether a file is gzip already, by its first two bytes (RFC 1952, section 2.3.1). */
export async function isGzip(file: Blob): Promise<boolean> {
  const [first, second] = new Uint8Array(await file.slice(0, 2).arrayBuffer())
  return first === 0x1F && second === 0x8B
}

/**
 * Compress a file before it is sent: CSV shrinks to about a quarter, and a paddock's uplink is slow.
 * @param file never read whole into memory
 * @param onRead told the share of the file that was read, 0 to 1
 * @param signal ends it with an AbortError
 */
export async function gzip(file: Blob, onRead: (share: number) => void, signal: AbortSignal): Promise<Blob> {
  let readBytes = 0
  const meter = new TransformStream<Uint8Array<ArrayBuffer>, Uint8Array<ArrayBuffer>>({
    transform(chunk, controller) {
      signal.throwIfAborted()
      readBytes += chunk.byteLength
      onRead(readBytes / file.size)
      controller.enqueue(chunk)
    },
  })
  const packed = file.stream().pipeThrough(meter).pipeThrough(new CompressionStream('gzip'))
  return new Response(packed).blob()
}
