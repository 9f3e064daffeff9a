import { useState } from 'react';
import { Money } from '#components/ui/Money.tsx';
import { paths } from '#lib/paths.ts';
import type { Fit } from '#lib/plan/types.ts';

export interface Offer {
  id: string;
  kind: 'personal' | 'workshop';
  priceMinor: number;
  currency: string;
  pieces: number | null;
}

interface BuyFormProps {
  planId: string;
  slug: string;
  offers: readonly Offer[];
  fit: Fit;
  /** Slug of the tracked link that the reader came by. */
  from: string;
  /** Made by the server for this showing of the form, so that a double click is one order. */
  requestKey: string;
  consentText: string;
  typed: { offerId: string; code: string };
  errors: Readonly<Record<string, string>>;
}

const WORDS = {
  personal: {
    label: 'Personal licence',
    note: 'Build it for yourself and your own home, as often as you like.',
  },
  workshop: { label: 'Workshop licence', note: 'Sell what you build from it.' },
};

/** Choosing a licence and going to the payment page: a plain form, so that it works without scripts. The price is the server's. */
export function BuyForm(props: BuyFormProps) {
  const { offers, fit, typed, errors } = props;
  const [offerId, setOfferId] = useState(typed.offerId || (offers[0]?.id ?? ''));
  return (
    <form method="post" action={paths.checkout()} className="buy">
      <input type="hidden" name="planId" value={props.planId} />
      <input type="hidden" name="slug" value={props.slug} />
      <input type="hidden" name="from" value={props.from} />
      <input type="hidden" name="requestKey" value={props.requestKey} />
      <input type="hidden" name="fit" value={JSON.stringify(fit)} />
      <fieldset className="choices">
        <legend className="choices__legend">Licence</legend>
        <div className="choices__cells">
          {offers.map((offer) => (
            <label key={offer.id} className="choices__cell">
              <input
                type="radio"
                name="offerId"
                value={offer.id}
                checked={offer.id === offerId}
                onChange={() => {
                  setOfferId(offer.id);
                }}
              />
              <span>
                {WORDS[offer.kind].label},{' '}
                {offer.priceMinor === 0 ? (
                  'free'
                ) : (
                  <Money minor={offer.priceMinor} currency={offer.currency} />
                )}
                <span className="choices__note">
                  {WORDS[offer.kind].note}
                  {offer.pieces === null ? '' : ` Up to ${offer.pieces} pieces.`}
                </span>
              </span>
            </label>
          ))}
        </div>
      </fieldset>
      <div className="field">
        <label className="field__label" htmlFor="buy-code">
          Code <span className="field__optional">(if you have one)</span>
        </label>
        <input
          id="buy-code"
          className="field__input field__input--figure"
          name="code"
          defaultValue={typed.code}
          maxLength={40}
          autoComplete="off"
          aria-describedby={errors['code'] ? 'buy-code-error' : undefined}
          aria-invalid={errors['code'] ? true : undefined}
        />
        {errors['code'] ? (
          <p className="field__error" id="buy-code-error">
            {errors['code']}
          </p>
        ) : null}
      </div>
      <div className="field">
        <label className="tick" htmlFor="buy-consent">
          <input
            id="buy-consent"
            type="checkbox"
            name="consent"
            value="yes"
            required
            aria-describedby={errors['consent'] ? 'buy-consent-error' : undefined}
          />
          <span>{props.consentText}</span>
        </label>
        {errors['consent'] ? (
          <p className="field__error" id="buy-consent-error">
            {errors['consent']}
          </p>
        ) : null}
      </div>
      <div className="actions">
        <button type="submit" className="button button--main">
          Go to the payment page
        </button>
      </div>
      <p className="small secondary">
        The price includes tax. You pay on a page of the payment service; we never see your card.
      </p>
    </form>
  );
}
