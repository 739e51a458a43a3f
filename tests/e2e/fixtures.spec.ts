import { expect, test } from './fixtures.ts';

/** The watch that every browser test stands under sees what it should. Here, what is provoked is expected. */
test.use({ expectedErrors: [/./] });

test('a breach of the content security policy is seen: inline script, style element, foreign request', async ({ page, troubles }) => {
  await page.goto('/');
  expect(troubles).toEqual([]);
  await page.evaluate(() => {
    const script = document.createElement('script');
    script.textContent = 'document.title = "breached"';
    const style = document.createElement('style');
    style.textContent = 'body { display: none }';
    document.body.append(script, style);
    fetch('https://elsewhere.example/').catch(() => undefined);
  });
  for (const directive of ['script-src', 'style-src', 'connect-src']) {
    await expect
      .poll(() => troubles.filter((trouble) => trouble.includes(`content security policy: ${directive}`)).length)
      .toBeGreaterThan(0);
  }
  expect(await page.title()).not.toBe('breached');
});

test('an uncaught error, an error on the console and a missing part are seen', async ({ page, troubles }) => {
  await page.goto('/');
  await page.evaluate(() => {
    setTimeout(() => {
      throw new Error('nobody caught this');
    });
    console.error('something is wrong');
    import(/* @vite-ignore */ `${location.origin}/assets/gone.js`).catch(() => undefined);
  });
  for (const expected of [/uncaught: .*nobody caught this/, /console: something is wrong/, /404 for .*\/assets\/gone\.js/]) {
    await expect.poll(() => troubles.some((trouble) => expected.test(trouble))).toBe(true);
  }
});

test('a refused request to /api is part of the conversation, not trouble', async ({ page, troubles }) => {
  await page.goto('/');
  expect(await page.evaluate(async () => (await fetch('/api/teams/none/garage')).status)).toBeGreaterThanOrEqual(400);
  expect(troubles).toEqual([]);
});
