import { describe, expect, it } from 'vitest';
import { escapeHtml, markup, raw } from './markup';

describe('markup', () => {
  it('escapes text in content and in attributes', () => {
    const name = `<img src=x onerror="alert('1')"> & co`;
    expect(markup`<td title="${name}">${name}</td>`.html).toBe(
      `<td title="${escapeHtml(name)}">&lt;img src=x onerror=&quot;alert(&#39;1&#39;)&quot;&gt; &amp; co</td>`,
    );
  });

  it('nests and joins without escaping twice, and leaves out what is not there', () => {
    const rows = ['a<b', 'c'].map((cell) => markup`<tr><td>${cell}</td></tr>`);
    expect(markup`<tbody>${rows}${null}${undefined}${false}${0}</tbody>`.html).toBe(
      '<tbody><tr><td>a&lt;b</td></tr><tr><td>c</td></tr>0</tbody>',
    );
  });

  it('takes ready HTML only when told so', () => {
    expect(markup`<p>${raw('<b>x</b>')}${'<b>x</b>'}</p>`.html).toBe('<p><b>x</b>&lt;b&gt;x&lt;/b&gt;</p>');
  });
});
