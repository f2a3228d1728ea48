// Serves the built site to the browsers under test, and misbehaves where a test asks for it.

import { readFile } from "node:fs/promises";
import { createServer } from "node:http";
import { extname, join } from "node:path";

const TYPES = {
  ".html": "text/html; charset=utf-8", ".js": "text/javascript; charset=utf-8", ".css": "text/css; charset=utf-8",
  ".wasm": "application/wasm", ".webmanifest": "application/manifest+json", ".svg": "image/svg+xml", ".png": "image/png",
};

/**
 * A server of `folder` on 127.0.0.1. `replaced` maps a name to other bytes or to a status number;
 * `asked` lists every name that was asked for; `down` makes it answer nothing.
 */
export async function serve(folder) {
  const site = { replaced: new Map(), asked: [], down: false };
  const server = createServer(async (request, response) => {
    if (site.down) {
      request.socket.destroy();
      return;
    }
    const name = decodeURIComponent(request.url.split(/[?#]/)[0].slice(1)) || "index.html";
    site.asked.push(name);
    const other = site.replaced.get(name);
    const headers = {
      "Content-Type": TYPES[extname(name)] ?? "application/octet-stream",
      "Cache-Control": "no-store",
    };
    try {
      if (typeof other === "number" || name.includes("..")) throw new Error("not served");
      const bytes = other ?? (await readFile(join(folder, name)));
      response.writeHead(200, headers).end(bytes);
    } catch {
      response.writeHead(typeof other === "number" ? other : 404).end();
    }
  });
  await new Promise((resolve) => server.listen(0, "127.0.0.1", resolve));
  site.url = `http://127.0.0.1:${server.address().port}/`;
  site.close = () => {
    server.closeAllConnections();
    return new Promise((resolve) => server.close(resolve));
  };
  return site;
}
