/// <reference types="@sveltejs/kit" />
/// <reference no-default-lib="true"/>
/// <reference lib="esnext" />
/// <reference lib="webworker" />
import { version } from '$service-worker';

/**
 * Keeps the application's own files as they are fetched, so that a page already open goes on working
 * without a network, and says so plainly when a page cannot be fetched. Pages and answers of the
 * server are never kept: they belong to whoever is signed in. Sending what waits is the page's part
 * (it knows who is signed in).
 */
const worker = self as unknown as ServiceWorkerGlobalScope;
const CACHE = `ebbtone-${version}`;
/** Files whose names change with their content. */
const IMMUTABLE = '/_app/immutable/';

worker.addEventListener('install', () => {
	void worker.skipWaiting();
});

worker.addEventListener('activate', (event) => {
	event.waitUntil(
		caches
			.keys()
			.then((names) =>
				Promise.all(names.filter((name) => name !== CACHE).map((name) => caches.delete(name)))
			)
			.then(() => worker.clients.claim())
	);
});

worker.addEventListener('fetch', (event) => {
	const { request } = event;
	if (request.method !== 'GET') return;
	const url = new URL(request.url);
	if (url.origin !== worker.location.origin) return;
	if (url.pathname.startsWith(IMMUTABLE)) event.respondWith(keptOrFetched(request));
	else if (request.mode === 'navigate') event.respondWith(pageOrNotice(request));
});

async function keptOrFetched(request: Request): Promise<Response> {
	const cache = await caches.open(CACHE);
	const kept = await cache.match(request);
	if (kept) return kept;
	const response = await fetch(request);
	if (response.ok) void cache.put(request, response.clone()).catch(() => undefined);
	return response;
}

async function pageOrNotice(request: Request): Promise<Response> {
	try {
		return await fetch(request);
	} catch {
		return new Response(NO_NETWORK, {
			status: 503,
			headers: { 'content-type': 'text/html; charset=utf-8', 'cache-control': 'no-store' }
		});
	}
}

const NO_NETWORK = `<!doctype html><html lang="en"><head><meta charset="utf-8">
<meta name="viewport" content="width=device-width,initial-scale=1"><title>No network · Ebbtone</title>
<style>:root{color-scheme:light dark;--g:#f5eddb;--i:#163a2f}@media(prefers-color-scheme:dark){:root{--g:#14201b;--i:#f0e7d2}}
body{margin:0;background:var(--g);color:var(--i);font:500 19px/1.5 "Gill Sans",Optima,Candara,sans-serif}
main{max-width:36em;padding:72px 24px}h1{font:560 37px/1.12 Palatino,Georgia,serif}a{color:inherit}</style></head>
<body><main><h1>No network.</h1><p>This page cannot be fetched now. What you did at the bench is kept in this
browser and sent when the network is back; until then, do not clear this browser’s data.</p>
<p><a href="">Try again</a></p></main></body></html>`;
