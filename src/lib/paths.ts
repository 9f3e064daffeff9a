/** Every address of the site that a link, a form or an e-mail points at. Parameters are encoded here and nowhere else. */
const part = (text: string) => encodeURIComponent(text);

function withQuery(path: string, query: Record<string, string | number | undefined> = {}): string {
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries(query))
    if (value !== undefined && value !== '') search.set(key, String(value));
  const text = search.toString();
  return text ? `${path}?${text}` : path;
}

export const paths = {
  home: () => '/',
  // The plan chest
  chest: (query?: { q?: string; space?: string; tag?: string; skill?: string; after?: string }) =>
    withQuery('/plans', query),
  plan: (slug: string, query?: Record<string, string | number | undefined>) =>
    withQuery(`/plans/${part(slug)}`, query),
  planFitCheck: (slug: string) => `/api/plans/${part(slug)}/fit`,
  planVisits: (slug: string) => `/api/plans/${part(slug)}/visits`,
  imprint: (slug: string) => `/imprints/${part(slug)}`,
  source: (slug: string, planSlug: string) => withQuery(`/plans/${part(planSlug)}`, { from: slug }),
  picture: (sha256: string, width?: number) => withQuery(`/pictures/${part(sha256)}`, { w: width }),
  guides: () => '/guides',
  guide: (slug: string) => `/guides/${slug.split('/').map(part).join('/')}`,
  // Accounts
  signIn: (next?: string) => withQuery('/sign-in', { next }),
  signUp: (next?: string) => withQuery('/sign-up', { next }),
  forgotPassword: () => '/forgot-password',
  resetPassword: (token?: string) => withQuery('/reset-password', { token }),
  verifyEmail: (token?: string) => withQuery('/verify-email', { token }),
  account: () => '/account',
  postSignIn: (next?: string) => withQuery('/api/account/sign-in', { next }),
  postSignUp: (next?: string) => withQuery('/api/account/sign-up', { next }),
  postSignOut: (next?: string) => withQuery('/api/account/sign-out', { next }),
  postForgotPassword: () => '/api/account/forgot-password',
  postResetPassword: (token: string) => withQuery('/api/account/reset-password', { token }),
  postVerifyEmail: (token: string) => withQuery('/api/account/verify-email', { token }),
  postRequestVerification: () => '/api/account/request-verification',
  postProfile: () => '/api/account/profile',
  postEmail: () => '/api/account/email',
  postPassword: () => '/api/account/password',
  postSessions: () => '/api/account/sessions',
  exportData: () => '/api/account/export',
  postErase: () => '/api/account/erase',
  postInvitation: (token: string) => `/api/account/invitations/${part(token)}`,
  invitation: (token: string) => `/invitations/${part(token)}`,
  // Buying
  checkout: () => '/api/checkout',
  order: (orderId: string) => `/orders/${part(orderId)}`,
  orders: () => '/orders',
  // The drawer
  drawer: () => '/drawer',
  licence: (licenceId: string, query?: { fit?: string }) => withQuery(`/drawer/${part(licenceId)}`, query),
  copies: (licenceId: string) => `/api/licences/${part(licenceId)}/copies`,
  fits: (licenceId: string) => `/api/licences/${part(licenceId)}/fits`,
  build: (licenceId: string) => `/api/licences/${part(licenceId)}/build`,
  copy: (copyId: string) => `/drawer/copies/${part(copyId)}`,
  copyState: (copyId: string) => `/api/copies/${part(copyId)}`,
  copyDownload: (copyId: string) => `/api/copies/${part(copyId)}/download`,
  // The drawing office
  office: () => '/office',
  officeImprint: (imprintSlug: string) => `/office/${part(imprintSlug)}`,
  officePeople: (imprintSlug: string) => `/office/${part(imprintSlug)}/people`,
  officePlan: (planId: string) => `/office/plans/${part(planId)}`,
  draft: (planId: string) => `/api/office/plans/${part(planId)}/draft`,
  proof: (planId: string) => `/api/office/plans/${part(planId)}/proof`,
  officePublish: (planId: string) => `/office/plans/${part(planId)}/publish`,
  officeProof: (planId: string) => `/office/plans/${part(planId)}/proof`,
  officePrices: (planId: string) => `/office/plans/${part(planId)}/prices`,
  applyForImprint: () => '/office/apply',
  // The sales book
  sales: (imprintSlug: string, query?: { after?: string; month?: string }) =>
    withQuery(`/sales/${part(imprintSlug)}`, query),
  salesOrder: (imprintSlug: string, orderId: string) => `/sales/${part(imprintSlug)}/orders/${part(orderId)}`,
  salesSources: (imprintSlug: string) => `/sales/${part(imprintSlug)}/sources`,
  salesCodes: (imprintSlug: string) => `/sales/${part(imprintSlug)}/codes`,
  salesPayouts: (imprintSlug: string) => `/sales/${part(imprintSlug)}/payouts`,
  statement: (imprintSlug: string, month: string, currency: string) =>
    withQuery(`/api/sales/${part(imprintSlug)}/statement`, { month, currency }),
  // The publisher's staff
  staff: () => '/staff',
  staffOrders: () => '/staff/orders',
  proofPlan: (planId: string) => `/proofs/${part(planId)}`,
};
