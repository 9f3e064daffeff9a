import { printAmount } from './currencies.ts';
import { escapeHtml as e, renderSheet } from './html.ts';
import { successUrlOf, type Typed } from './pay-session.ts';
import type { Session, SessionFile } from './tables.ts';
import { COUNTRIES } from './tax-table.ts';
import { printDiscountName } from './print-discount.ts';
import type { World } from './world.ts';

export interface PageState {
  typed: Typed;
  message: string | null;
  codeMessage: string | null;
  code: string;
}

function lineRows(session: Session, file: SessionFile): string {
  const currency = session.currency ?? 'usd';
  return file.lines
    .map((line) => {
      const each =
        line.quantity === 1
          ? ''
          : ` <span class="small">${line.quantity} × ${e(printAmount(line.price.unit_amount ?? 0, currency))}</span>`;
      return `<tr><th scope="row">${e(line.description ?? 'Item')}${each}</th><td>${e(printAmount(line.amount_subtotal, currency))}</td></tr>`;
    })
    .join('\n');
}

function totalRows(world: World, session: Session, file: SessionFile): string {
  const currency = session.currency ?? 'usd';
  const rows: string[] = [];
  if (file.discount) {
    rows.push(
      `<tr><th scope="row">Discount: ${e(printDiscountName(world, file.discount))}</th><td>−${e(printAmount(file.discountAmount, currency))}</td></tr>`,
    );
  }
  if (session.automatic_tax.enabled) {
    const rate = file.taxes[0]?.rate;
    const name = rate
      ? `${rate.display_name} ${rate.percentage} %${rate.inclusive ? ', included' : ''}`
      : 'Tax';
    const isKnown = session.automatic_tax.status === 'complete';
    rows.push(
      `<tr><th scope="row">${e(name)}</th><td>${isKnown ? e(printAmount(session.total_details?.amount_tax ?? 0, currency)) : 'by country'}</td></tr>`,
    );
  }
  rows.push(
    `<tr class="total"><th scope="row">Total</th><td data-testid="total">${e(printAmount(session.amount_total ?? 0, currency))}</td></tr>`,
  );
  return rows.join('\n');
}

function codeFields(session: Session, file: SessionFile, state: PageState): string {
  if (!session.allow_promotion_codes) return '';
  if (file.discount?.promotionCode) {
    return '<p><button name="do" value="remove-code" formnovalidate>Take the code off</button></p>';
  }
  const fault = state.codeMessage ? `<p class="fault" role="alert">${e(state.codeMessage)}</p>` : '';
  return `<label for="code">Promotion code</label><div class="with"><input id="code" name="code" value="${e(state.code)}" autocomplete="off"><button name="do" value="apply-code" formnovalidate>Use the code</button></div>${fault}`;
}

function countryField(session: Session, typed: Typed): string {
  const options = Object.entries(COUNTRIES)
    .sort((a, b) => a[1].localeCompare(b[1], 'en'))
    .map(
      ([code, name]) =>
        `<option value="${code}"${code === typed.country ? ' selected' : ''}>${e(name)}</option>`,
    )
    .join('');
  const select = `<select id="country" name="country" required autocomplete="country"><option value="">Choose</option>${options}</select>`;
  const button = session.automatic_tax.enabled
    ? '<button name="do" value="update" formnovalidate>Work out the tax</button>'
    : '';
  return `<label for="country">Country</label><div class="with">${select}${button}</div>`;
}

function cardFields(typed: Typed): string {
  return `<h2>Card</h2>
<p class="small">Test cards: 4242 4242 4242 4242 pays; 4000 0000 0000 0002 is declined; 4000 0025 0000 3155 asks for confirmation. Any future expiry, any security code.</p>
<label for="card">Card number</label><input id="card" name="card" inputmode="numeric" autocomplete="off" required value="${e(typed.card)}">
<div class="pair"><div><label for="expiry">Expiry (month / year)</label><input id="expiry" name="expiry" inputmode="numeric" autocomplete="off" required placeholder="12 / 34" value="${e(typed.expiry)}"></div>
<div><label for="cvc">Security code (CVC)</label><input id="cvc" name="cvc" inputmode="numeric" autocomplete="off" required value="${e(typed.cvc)}"></div></div>`;
}

function consentFields(session: Session, typed: Typed): string {
  const wants = session.consent_collection;
  const terms =
    wants?.terms_of_service === 'required'
      ? `<label class="tick"><input type="checkbox" name="agreed" value="yes" required${typed.hasAgreed ? ' checked' : ''}><span>${e(session.custom_text.terms_of_service_acceptance?.message ?? 'I agree to the terms of the seller.')}</span></label>`
      : '';
  const news =
    wants?.promotions === 'auto'
      ? `<label class="tick"><input type="checkbox" name="news" value="yes"${typed.wantsNews ? ' checked' : ''}><span>Send me news of the seller by e-mail.</span></label>`
      : '';
  return terms + news;
}

/** The hosted payment page of an open session; every button works without JavaScript. */
export function renderPayPage(world: World, session: Session, file: SessionFile, state: PageState): string {
  const { typed } = state;
  const isFree = session.amount_total === 0;
  const email = session.customer_email ?? typed.email;
  const fault = state.message ? `<p class="fault" role="alert">${e(state.message)}</p>` : '';
  const back = session.cancel_url
    ? `<p><a href="${e(session.cancel_url)}">Back to the shop without paying</a></p>`
    : '';
  const submit = session.custom_text.submit
    ? `<p class="small">${e(session.custom_text.submit.message)}</p>`
    : '';
  const verb = isFree
    ? 'Complete the order'
    : `Pay ${printAmount(session.amount_total ?? 0, session.currency ?? 'usd')}`;
  return renderSheet(
    'Pay',
    `${back}
${fault}
<form method="post" action="/c/pay/${session.id}">
<button hidden name="do" value="pay"></button>
<table>${lineRows(session, file)}
${totalRows(world, session, file)}</table>
${codeFields(session, file, state)}
<h2>You</h2>
<label for="email">E-mail</label><input id="email" name="email" type="email" required autocomplete="email" value="${e(email)}"${session.customer_email ? ' readonly' : ''}>
<label for="name">Name</label><input id="name" name="name" required autocomplete="name" value="${e(typed.name)}">
${countryField(session, typed)}
${isFree ? '' : cardFields(typed)}
${consentFields(session, typed)}
<button class="main" name="do" value="pay">${e(verb)}</button>
${submit}
</form>`,
  );
}

/** The page on which the buyer's bank asks for confirmation. */
export function renderAuthenticatePage(session: Session): string {
  return renderSheet(
    'Confirm the payment with your bank',
    `<p>The bank of this test card wants the buyer to confirm ${e(printAmount(session.amount_total ?? 0, session.currency ?? 'usd'))}.</p>
<form method="post" action="/c/pay/${session.id}/authenticate">
<button class="main" name="answer" value="complete">Complete authentication</button>
<button class="main" name="answer" value="fail">Fail authentication</button>
</form>`,
  );
}

/** What a session says that can no longer be paid. */
export function renderClosedPage(session: Session): string {
  const isPaid = session.status === 'complete';
  const next = isPaid ? successUrlOf(session) : session.cancel_url;
  return renderSheet(
    isPaid ? 'This payment is complete' : 'This payment has expired',
    `<p>${isPaid ? 'It has been made already; nothing is charged again.' : 'Nothing was charged. Start again from the shop.'}</p>
${next ? `<p><a href="${e(next)}">${isPaid ? 'On to the order' : 'Back to the shop'}</a></p>` : ''}`,
  );
}
