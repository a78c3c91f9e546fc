/** The limit for a kept page: node:http sending the same bytes with the same headers. Arguments: a file of JSON {headers, body (base64)}. */
import { createServer } from 'node:http';
import { readFileSync } from 'node:fs';

const { headers, body } = JSON.parse(readFileSync(process.argv[2], 'utf8'));
const bytes = Buffer.from(body, 'base64');
const { 'content-length': _length, 'content-encoding': _encoding, 'content-type': _type, ...unchanged } = headers;
createServer((req, res) => {
  if (req.headers['if-none-match'] === headers.etag) {
    res.writeHead(304, unchanged);
    res.end();
    return;
  }
  res.writeHead(200, headers);
  res.end(bytes);
}).listen(0, '127.0.0.1', function listening() {
  console.log(this.address().port);
});
