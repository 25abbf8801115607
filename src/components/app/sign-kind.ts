export type SignKind = 'info' | 'attention' | 'error' | 'success';
