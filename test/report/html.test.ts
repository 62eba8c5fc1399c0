import fc from 'fast-check';
import { expect, it } from 'vitest';
import { html } from '../../src/report/html.ts';

it('text from a file never becomes markup, in an element or in an attribute', () => {
  expect(html`<p title="${'"><script>x</script>'}">${'<b>'}</p>`.markup).toBe(
    '<p title="&quot;&gt;&lt;script&gt;x&lt;/script&gt;">&lt;b&gt;</p>',
  );
  fc.assert(
    fc.property(fc.string(), (text) => {
      expect(html`${text}`.markup).not.toMatch(/[<>"']/);
    }),
  );
});

it('markup made by the tag is kept, lists are joined, null is nothing', () => {
  expect(html`<ul>${['a', '<'].map((each) => html`<li>${each}</li>`)}</ul>${null}${7}`.markup).toBe(
    '<ul><li>a</li><li>&lt;</li></ul>7',
  );
});
