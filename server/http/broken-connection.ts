import type { Socket } from 'node:net';
import { bannerHeader, bannerHeaderValue } from '../clinical-banner.js';
import { problemOf } from './problems.js';

/** Answers bytes that are not HTTP at all. */
export function answerBrokenConnection(error: Error & { code?: string }, socket: Socket): void {
  if (error.code === 'ECONNRESET' || !socket.writable) {
    socket.destroy();
    return;
  }
  const tooLarge = error.code === 'HPE_HEADER_OVERFLOW';
  const body = JSON.stringify(
    problemOf('malformed', tooLarge ? 'The headers are too large.' : 'The request is not valid HTTP.', '/'),
  );
  socket.end(
    `HTTP/1.1 400 Bad Request\r\n${bannerHeader}: ${bannerHeaderValue}\r\ncontent-type: application/problem+json; charset=utf-8\r\ncontent-length: ${Buffer.byteLength(body)}\r\nconnection: close\r\n\r\n${body}`,
  );
}
