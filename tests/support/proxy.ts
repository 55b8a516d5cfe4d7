import { connect, createServer, type AddressInfo, type Socket } from "node:net";

export interface Proxy {
  readonly port: number;
  /** Ends every connection and takes no new ones, as if the other side were away. */
  cut(): void;
  /** Lets connections through again. */
  mend(): void;
  /** Called with each piece of data from the far side before it is passed on; answering "cut" drops it and the connection. */
  onAnswer: ((data: Buffer) => "pass" | "cut") | null;
  close(): Promise<void>;
}

/** A wire between two ends on loopback that a test can cut. */
export async function startProxy(target: { port: number }): Promise<Proxy> {
  const open = new Set<Socket>();
  let away = false;
  const server = createServer((near) => {
    if (away) return void near.destroy();
    const far = connect(target.port, "127.0.0.1");
    for (const [socket, other] of [[near, far], [far, near]] as const) {
      open.add(socket);
      socket.on("error", () => other.destroy());
      socket.on("close", () => {
        open.delete(socket);
        other.destroy();
      });
    }
    near.on("data", (data) => void far.write(data));
    far.on("data", (data) => {
      if (proxy.onAnswer?.(data) === "cut") return void near.destroy();
      near.write(data);
    });
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const proxy: Proxy = {
    port: (server.address() as AddressInfo).port,
    onAnswer: null,
    cut() {
      away = true;
      for (const socket of open) socket.destroy();
    },
    mend() {
      away = false;
    },
    close() {
      for (const socket of open) socket.destroy();
      return new Promise((resolve) => server.close(() => resolve()));
    },
  };
  return proxy;
}
